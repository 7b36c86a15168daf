using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>Writes what the run costs and what of it was lost.</summary>
internal static class CostWriter
{
    public static CostView Write(RunState run, StepTrail trail, RunForecast? forecast)
    {
        var nodes = run.Open?.Nodes;
        var wall = trail.OpenedAt is { } opened && trail.LatestAt is { } latest ? (latest - opened).TotalSeconds : 0;
        var spentSeconds = Math.Max(wall, run.Times.Total);
        var perPass = run.Iterations == 0 ? 0 : spentSeconds / run.Iterations;
        var lost = run.IterationsRejected + trail.IterationsUnconverged;
        return new CostView
        {
            Solvers = [.. run.Times.Solvers.Select(s => new SolverSeconds(s.Solver, Robust.Median(s.Seconds, SolverTimes.PassesKept)))],
            WaitingSeconds = run.Parallel && run.Times.Solvers.Count > 1 ? Waiting(run) : null,
            PassSeconds = run.Times.Passes.Count == 0 ? null : Robust.Median(run.Times.Passes, SolverTimes.PassesKept),
            Passes = (int)Math.Min(int.MaxValue, run.Iterations),
            NodeHoursSpent = nodes * spentSeconds / 3600,
            NodeHoursLost = nodes * perPass * lost / 3600,
            LostText = lost == 0 ? "nothing was redone, rejected or given up" : $"{Say.Count((int)Math.Min(int.MaxValue, run.IterationsRejected), "iteration", "iterations")} in rejected attempts, {Say.Count((int)Math.Min(int.MaxValue, trail.IterationsUnconverged), "iteration", "iterations")} in steps that gave up",
            LastCheckpointStep = run.Checkpoint?.Step,
            JobsStillNeeded = Jobs(run, trail, forecast),
            SurrogateText = run.Settings.Method == Records.CouplingMethod.IqnIlsm || run.Settings.Surrogate is not null
                ? "break-even unknown: no run of this campaign without the surrogate has been compared"
                : "no surrogate in use",
        };
    }

    private static double Waiting(RunState run)
    {
        var medians = run.Times.Solvers.Select(s => Robust.Median(s.Seconds, SolverTimes.PassesKept)).ToArray();
        return medians.Max() - medians.Min();
    }

    /// <summary>Further allocations as long as this one; null without an allocation or a forecast.</summary>
    private static int? Jobs(RunState run, StepTrail trail, RunForecast? forecast)
    {
        if (run.Open?.AllocationEndsAt is not { } until || trail.OpenedAt is not { } opened || forecast?.Ends is not { } ends || until <= opened) return null;
        return ends <= until ? 0 : (int)Math.Min(1e6, Math.Ceiling((ends - until) / (until - opened)));
    }
}
