using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Parts;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.RunPage;

/// <summary>"What carries the residual?"</summary>
public static class SplitAnswer
{
    public static Answer Of(RunDetail run)
    {
        ArgumentNullException.ThrowIfNull(run);
        if (run.Split.Count == 0)
        {
            if (run.Settings.Method is Records.CouplingMethod.Fixed or Records.CouplingMethod.Aitken)
                return new Answer(StateMark.NotJudged, "Nothing but the relaxation: the method in use has no columns.");
            return run.Basis is null
                ? Answer.NotJudged(run, "Not judged with what this run sends.", "polluted", "conditioning", "starved")
                : new Answer(StateMark.Learning, "No pass of this step is split yet.");
        }
        var alert = Answer.Open(run, "polluted", "starved");
        var done = run.Split.Where(b => b.Promise is "kept" or "broken").ToArray();
        var broken = done.Count(b => b.Promise == "broken");
        var notes = new List<string>();
        if (done.Length > 0) notes.Add($"The linear model foretold the next residual well in {done.Length - broken} of {Numbers.Count(done.Length, "pass", "passes")}.");
        notes.Add("A promise is broken when less than 0.3 was to be left over and more than 0.7 came.");
        if (run.Split.Any(b => b.Promise == "none-made")) notes.Add("Where more than 0.3 was to be left over, none was made.");
        return new Answer(alert is null ? StateMark.OnCourse : StateMarks.Of(alert), Say(run.Split)) { Notes = notes };
    }

    private static string Say(IReadOnlyList<SplitBar> bars)
    {
        var first = Carrier(bars[0]);
        var last = Carrier(bars[^1]);
        if (first == last)
            return last == "uncovered" ? $"Nothing much: {Numbers.Percent(bars[^1].Uncovered)} of the residual is uncovered." : Capital($"{Names(last)} from the first pass to the last.");
        var from = bars.Index().Reverse().TakeWhile(b => Carrier(b.Item) == last).Last().Item.Iteration;
        return Capital($"{Names(first)} at first, {Names(last)} from iteration {from} on.");
    }

    private static string Carrier(SplitBar b) =>
        new[] { ("live", b.Live), ("history", b.History), ("surrogate", b.Surrogate), ("uncovered", b.Uncovered) }.MaxBy(p => p.Item2).Item1;

    private static string Names(string carrier) => carrier switch
    {
        "live" => "this step's own columns",
        "history" => "history",
        "surrogate" => "the surrogate",
        _ => "nothing",
    };

    private static string Capital(string text) => char.ToUpperInvariant(text[0]) + text[1..];
}
