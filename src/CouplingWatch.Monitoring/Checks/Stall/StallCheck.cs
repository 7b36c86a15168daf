using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Checks.Progress;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Wording;
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
            : $"The residual is no lower than {StepState.ProgressWindow} iterations ago and only {Say.Number(Math.Pow(10, step.FirstZ - step.LowestZ))} times lower at best than at the start of the step";
        findings.Add(new Finding(Id, Severity.Warning, text + ".", evidence));
    }
}
