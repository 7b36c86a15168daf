using System.Globalization;
using CouplingWatch.Components.Charts;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Parts;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.RunPage;

/// <summary>"Is it converging?" of the step in progress.</summary>
public static class ConvergenceAnswer
{
    public static Answer Of(RunDetail run)
    {
        ArgumentNullException.ThrowIfNull(run);
        var governing = run.Paths.FirstOrDefault(p => p.Governs) ?? run.Paths.FirstOrDefault();
        if (governing is null || governing.Points.Count == 0)
            return new Answer(StateMark.Learning, "No iteration yet.") { Facts = Targets(run) };
        var (mark, say) = Say(run, governing);
        return new Answer(mark, say) { Notes = Notes(run, governing), Facts = [.. Norms(run), .. Targets(run), .. Rate(run), .. Governs(run)] };
    }

    private static (StateMark, string) Say(RunDetail run, FieldPath governing)
    {
        var last = governing.Points[^1];
        var code = run.Summary.Verdict.Code;
        if (code is "diverging" or "diverged" || Answer.OpenNow(run, "divergence") is not null)
            return (StateMark.Diverging, run.Rate is { Factor: > 1 and var grows } ? $"No: the residual grows {Numbers.Sig(grows, 2)}-fold an iteration." : "No: it diverges.");
        if (!ResidualPathChart.Judged(governing))
            return (StateMark.NotJudged, "Not judged: no target is known, so only the norm is drawn.");
        if (run.Summary.Passes is { Count: > 0 } passes && passes[^1].Done)
            return (StateMark.Finished, $"Yes: done at iteration {last.Iteration}.");
        if (run.Summary.State is not "live" and not "quiet")
            return (StateMark.GaveUp, $"The run ended at iteration {last.Iteration} of step {run.Summary.Step}, before its target.");
        if (run.Summary.State == "quiet")
            return (StateMark.Silent, $"Silent since iteration {last.Iteration}; nothing is foretold.");
        if (run.StepForecast is { } f)
        {
            var at = f.AtIteration + f.Remaining;
            if (governing.Cap is { } cap && at > cap - 1)
                return (StateMark.LosingTime, $"Hardly: {Keeps(run.Rate)}; the cap of {cap} comes first.");
            return f.Basis == "paths"
                ? (StateMark.OnCourse, $"Yes: {ResidualPathChart.Met(f).Replace("met", "done", StringComparison.Ordinal)}, as earlier steps were.")
                : (StateMark.Learning, $"Likely: done at iteration {Math.Round(at).ToString("0", CultureInfo.InvariantCulture)}, by its rate alone.");
        }
        if (last.Iteration < 2) return (StateMark.Learning, "Too early to say: the forecast begins with the third residual.");
        if (Answer.OpenNow(run, "slow", "stall", "noise-floor", "oscillation") is { } alert) return (StateMarks.Of(alert), "No: it does not get nearer to its target.");
        return run.Rate is { Factor: >= 1 } ? (StateMark.LosingTime, "Not now: the residual does not fall.") : (StateMark.Learning, "Open: no forecast can be given.");
    }

    private static IReadOnlyList<string> Notes(RunDetail run, FieldPath governing)
    {
        var notes = new List<string>();
        if (run.Rate is { } r && double.IsFinite(r.Factor)) notes.Add(Falls(r));
        var far = run.Paths.Where(p => p.Points.Count > 0 && p.Points[^1].Need is { } n && double.IsFinite(n)).ToArray();
        if (far.Length > 0)
            notes.Add(Answer.Sentence(string.Join("; ", far.OrderByDescending(p => p.Governs).Select(p => p.Points[^1].Need <= 1e-9 ? $"{p.Field} has met its target" : $"{p.Field} has {Numbers.Fixed(p.Points[^1].Need, 1)} decades to go"))));
        if (run.StepForecast is { Basis: "paths" } && governing.BandSteps > 0) notes.Add($"Foretold from {Numbers.Count(governing.BandSteps, "earlier step")}.");
        if (Answer.OpenNow(run, "slow", "stall", "noise-floor", "oscillation", "divergence") is { } alert) notes.Add(Answer.Sentence(alert.Text));
        return notes;
    }

    private static string Falls(RateEstimate r) => r.Factor switch
    {
        < 0.5 => $"The residual falls by a factor of {Numbers.Sig(1 / r.Factor, 2)} an iteration (10–90 %: {Range(1 / r.High, 1 / r.Low)}).",
        < 1 => $"Each iteration keeps {Numbers.Sig(r.Factor)} of the residual (10–90 %: {Range(r.Low, r.High)}).",
        _ => $"The residual grows {Numbers.Sig(r.Factor, 2)}-fold an iteration (10–90 %: {Range(r.Low, r.High)}).",
    };

    private static string Keeps(RateEstimate? r) => r is { } rate ? $"each iteration keeps {Numbers.Sig(rate.Factor, 2)} of the residual" : "it falls too slowly";

    private static string Range(double low, double high) => $"{Numbers.Sig(low)} to {Numbers.Sig(high)}";

    private static IEnumerable<Fact> Norms(RunDetail run) => run.Paths.Where(p => p.Points.Count > 0).Select(p => new Fact($"‖r‖ {p.Field}", Numbers.WithUnit(p.Points[^1].Norm, p.Unit)));

    private static IReadOnlyList<Fact> Targets(RunDetail run) =>
        [.. run.Paths.Select(p => new Fact($"target {p.Field}", Numbers.WithUnit(p.Target, p.Unit), p.Target is null ? "the run sends neither a tolerance nor targets" : null))];

    private static IEnumerable<Fact> Rate(RunDetail run) =>
        run.Rate is { } r && double.IsFinite(r.Factor) ? [new Fact("factor an iteration", $"{Numbers.Sig(r.Factor)} ({Numbers.Sig(r.Low)}–{Numbers.Sig(r.High)})")] : [];

    private static IEnumerable<Fact> Governs(RunDetail run) =>
        run.Paths.Count > 1 && run.Paths.FirstOrDefault(p => p.Governs) is { } g ? [new Fact("governs now", g.Field)] : [];
}
