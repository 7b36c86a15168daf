using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.Checks.Progress;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Slow;

/// <summary>The residual falls steadily, but so slowly that the step will not be done within its cap. Level 0.</summary>
internal sealed class SlowCheck(ProgressOptions options) : ICheck
{
    public string Id => CheckIds.Slow;

    public void Iteration(RunState run, List<Finding> findings)
    {
        var step = run.Step;
        var progress = ProgressState.Of(step, options);
        if (!progress.Judged || !progress.Crawls) return;
        var slope = Robust.Slope(step.Z, StepState.ProgressWindow).Slope;
        var needed = step.Need is { } need && need > 0 ? need / -slope : double.NaN;
        var left = run.Settings.IterationCap is { } cap ? cap - step.Iteration : double.NaN;
        var tooFar = needed > options.TimesTheCapLeft * left;
        if (progress.Improves && !tooFar) return;
        var evidence = new JsonObject { ["factorPerIteration"] = Math.Pow(10, slope), ["improvementDecades"] = progress.Improvement, ["fallingShare"] = progress.FallingShare };
        var text = $"Each iteration leaves {Say.Number(100 * Math.Pow(10, slope))} % of the residual";
        if (double.IsFinite(needed))
        {
            evidence["iterationsNeeded"] = needed;
            text += $": {Say.Number(Math.Ceiling(needed))} more iterations to the target";
            if (double.IsFinite(left))
            {
                evidence["iterationsLeft"] = left - 1;
                text += $", {Say.Number(Math.Max(0, left - 1))} left until the cap";
            }
        }
        findings.Add(new Finding(Id, Severity.Warning, text + ".", evidence));
    }

    public void Advise(RunState run, Alert alert, List<Move> moves)
    {
        if (alert.Check != Id) return;
        if (Moves.RelaxationToBest(run) is { } relaxation) moves.Add(relaxation);
        if (Moves.ToQuasiNewton(run) is { } method) moves.Add(method);
        if (alert.Cause is null && Moves.HistoryUp(run) is { } history) moves.Add(history);
    }
}
