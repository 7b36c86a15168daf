using CouplingWatch.Monitoring.State;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>Node-hours still to spend, and how many of them are likely wasted: what the board is ordered by.</summary>
/// <remarks>The chances below are weights for an order, not measurements (common practice, no source).</remarks>
internal static class Stake
{
    public const double Diverging = 1;
    public const double GaveUp = 0.9;
    public const double SilentRun = 0.5;
    public const double LosingTimeLeast = 0.25;
    public const double Dearer = 0.15;

    public static (double? Left, double? AtStake) Of(RunState run, Verdict verdict, RunForecast? forecast, StepTrail trail, double? bestIterations)
    {
        if (run.Close is not null) return (0, 0);
        if (run.Open?.Nodes is not { } nodes) return (null, null);
        var from = trail.LatestAt ?? run.At;
        var until = forecast?.Ends ?? run.Open.AllocationEndsAt;
        if (run.Open.AllocationEndsAt is { } end && (until is null || end < until)) until = end;
        if (until is not { } last) return (null, null);
        var left = Math.Max(0, nodes * (last - from).TotalHours);
        var chance = verdict.Code switch
        {
            "diverging" => Diverging,
            "gave-up" => GaveUp,
            "silent" => SilentRun,
            "losing-time" => Math.Max(LosingTimeLeast, Excess(run, bestIterations)),
            "dearer" => Dearer,
            _ => 0,
        };
        return (left, left * Math.Max(chance, 0.5 * (forecast?.ChanceToMiss ?? 0)));
    }

    private static double Excess(RunState run, double? best)
    {
        if (best is not { } b || run.Counts.Count == 0) return LosingTimeLeast;
        var sum = 0.0;
        for (var i = 0; i < run.Counts.Count; i++) sum += run.Counts[i];
        return 1 - Math.Min(1, b * run.Counts.Count / sum);
    }
}
