using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.Forecast;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Capped;

/// <summary>A step went on without convergence; and a run whose last two steps did. Level 0.</summary>
internal sealed class CappedCheck : ICheck
{
    public string Id => CheckIds.Capped;

    public void StepClosed(RunState run, in ClosedStep step, List<Finding> findings)
    {
        if (step.Outcome == StepOutcome.Capped) findings.Add(Capped(run, step));
        if (step.Unconverged && run.UnconvergedInARow >= 2) findings.Add(Unconverged(run, step));
    }

    public void Advise(RunState run, Alert alert, List<Move> moves)
    {
        if (alert.Check is not (CheckIds.Capped or CheckIds.UnconvergedRun) || alert.Cause is not null) return;
        if (Moves.HistoryUp(run) is { } history) moves.Add(history);
        if (Moves.ToQuasiNewton(run) is { } method) moves.Add(method);
        if (run.Settings.IterationCap is { } cap && alert.Evidence["iterationsEnough"]?.GetValue<double>() is { } enough && enough > cap) moves.Add(Moves.CapUp(run, (int)enough));
    }

    /// <summary>The iterations the rate of the step asked for, at most three times those it took; null when that rate leads nowhere.</summary>
    private static double? EnoughFor(RunState run, in ClosedStep step)
    {
        if (step.LastNeed is not { } need || need <= 0) return null;
        var slope = Robust.Slope(run.Step.Z, StepForecaster.RateWindow).Slope;
        if (!(slope < -StepForecaster.LeastFall)) return null;
        var more = need / -slope;
        return more > 2 * step.Iterations ? null : step.Iterations + Math.Ceiling(more) + 1;
    }

    private static Finding Capped(RunState run, in ClosedStep step)
    {
        var evidence = new JsonObject { ["iterations"] = step.Iterations };
        var text = $"Step {step.Step} went on without convergence after {Say.Count(step.Iterations, "iteration", "iterations")}";
        if (step.LastNeed is { } need)
        {
            evidence["timesAboveTarget"] = Math.Pow(10, need);
            text += need > 0
                ? $", its residual {Say.Number(Math.Pow(10, need))} times above the target"
                : $", although its residual is {Say.Number(Math.Pow(10, -need))} times below the declared target";
        }
        if (EnoughFor(run, step) is { } enough) evidence["iterationsEnough"] = enough;
        return new Finding(CheckIds.Capped, Severity.Warning, text + ".", evidence);
    }

    private static Finding Unconverged(RunState run, in ClosedStep step)
    {
        var enough = EnoughFor(run, step);
        var evidence = new JsonObject { ["stepsInARow"] = run.UnconvergedInARow, ["unconvergedSteps"] = run.StepsCapped + run.StepsFailed, ["steps"] = run.StepsComplete };
        if (enough is not null) evidence["iterationsEnough"] = enough;
        return new Finding(CheckIds.UnconvergedRun, Severity.Critical,
            $"The last {run.UnconvergedInARow} steps went on without convergence ({run.StepsCapped + run.StepsFailed} of {run.StepsComplete} in all): from step {run.UnconvergedSince} on the results are not those of the coupled problem.",
            evidence);
    }
}
