using System.Text;

namespace CouplingWatch.Sweeps;

/// <summary>The table of many races: harm, nearness to the best arm, capped steps, cost.</summary>
internal static class RaceTable
{
    public static string Line(RaceTrial trial)
    {
        var view = trial.View;
        var outs = string.Join("; ", view.Arms.Skip(1).Select(a => $"{a.Name} {a.Mean:0.#}{(a.State == "out" ? $" out r{a.OutRound}" : a.State == "winner" ? " won" : "")}"));
        return $"{trial.Variant.Name,-28} {trial.Start.Name,-32} {view.Verdict?.Code,-16} {view.Verdict?.Watch,-9} keep {trial.Keep,5:0.0} got {trial.Outcome,5:0.0} best {trial.Best,5:0.0} "
            + $"{(trial.Harmful ? "HARM " : trial.Within(0.1) ? "≤10%" : trial.Within(0.2) ? "≤20%" : "far ")} steps {trial.RaceSteps,3} cost {trial.Cost,6:0} capped {trial.CappedByChallengers} | {outs}"
            + $" | arms {string.Join(' ', trial.Arms.Select(a => $"{a:0.0}"))}";
    }

    public static string Summary(string name, IReadOnlyCollection<RaceTrial> trials)
    {
        if (trials.Count == 0) return $"{name}: no race";
        var nothing = trials.Where(t => t.NothingToGain).ToList();
        var gain = trials.Where(t => !t.NothingToGain).ToList();
        var text = new StringBuilder();
        text.Append($"{name,-30} races {trials.Count,4}  harmful {trials.Count(t => t.Harmful),3}  within 10 % {Share(t => t.Within(0.1)),6}  within 20 % {Share(t => t.Within(0.2)),6}  ");
        text.Append($"steps {trials.Average(t => t.RaceSteps),5:0.0}  capped by challengers {trials.Average(t => t.CappedByChallengers),5:0.00}  ");
        text.Append($"cost, nothing to gain {(nothing.Count == 0 ? "—" : $"{nothing.Average(t => t.Cost):0.0} (worst {nothing.Max(t => t.Cost):0}, {nothing.Count})"),-26} ");
        text.Append($"cost, something to gain {(gain.Count == 0 ? "—" : $"{gain.Average(t => t.Cost):0.0} ({gain.Count})")}");
        return text.ToString();

        string Share(Func<RaceTrial, bool> holds) => $"{100.0 * trials.Count(holds) / trials.Count:0.0} %";
    }

    public static void Print(TextWriter to, IReadOnlyList<RaceTrial> trials)
    {
        foreach (var variant in trials.GroupBy(t => t.Variant)) to.WriteLine(Summary((variant.Key.Held ? "* " : "  ") + variant.Key.Name, [.. variant]));
        to.WriteLine();
        foreach (var start in trials.GroupBy(t => t.Start)) to.WriteLine(Summary("  " + start.Key.Name, [.. start]));
        to.WriteLine();
        to.WriteLine(Summary("variants used for choosing", [.. trials.Where(t => !t.Variant.Held)]));
        to.WriteLine(Summary("* variants never used", [.. trials.Where(t => t.Variant.Held)]));
        to.WriteLine(Summary("all", trials));
    }
}
