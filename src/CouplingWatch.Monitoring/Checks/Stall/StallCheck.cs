using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.Checks.Progress;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Stall;

/// <summary>The residual never fell by much, or only alternates, and makes no progress. Level 0; level 3 tells an alternating one.</summary>
internal sealed class StallCheck(ProgressOptions options) : ICheck
{
    public string Id => CheckIds.Stall;

    public void Iteration(RunState run, List<Finding> findings)
    {
        var step = run.Step;
        var progress = ProgressState.Of(step, options);
        if (!progress.Wanders || (progress.FellFirst && !progress.Alternates)) return;
        var evidence = new JsonObject
        {
            ["fellDecades"] = step.FirstZ - step.LowestZ,
            ["improvementDecades"] = progress.Improvement,
            ["fallingShare"] = progress.FallingShare,
            ["alternating"] = progress.Alternates,
        };
        var text = progress.Alternates
            ? $"The residual changes sign at each iteration and gained {Say.Number(Math.Max(0, progress.Improvement))} decades in the last {StepState.ProgressWindow}"
            : $"The residual makes no progress for {StepState.ProgressWindow} iterations and {Fell(step)}";
        findings.Add(new Finding(Id, Severity.Warning, text + ".", evidence));
    }

    private static string Fell(StepState step) => step.FirstZ - step.LowestZ < 0.05
        ? "was never lower than at the start of the step"
        : $"was {Say.Number(Math.Pow(10, step.FirstZ - step.LowestZ))} times lower at best than at the start of the step";

    public void Advise(RunState run, Alert alert, List<Move> moves)
    {
        if (alert.Check != Id) return;
        if (alert.Cause is not null) return;
        if (run.Settings.Method == CouplingMethod.Fixed)
        {
            if (Moves.RelaxationDown(run) is { } relaxation) moves.Add(relaxation);
            if (Moves.ToQuasiNewton(run) is { } method) moves.Add(method);
        }
        else if (Moves.DropHistory(run) is { } drop)
        {
            moves.Add(drop);
        }
    }
}
