using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.Checks.Progress;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.NoiseFloor;

/// <summary>The residual fell, then wanders at a floor above its target: what the inner solvers leave is larger than what the coupling asks for. Level 0.</summary>
internal sealed class NoiseFloorCheck(ProgressOptions options) : ICheck
{
    public string Id => CheckIds.NoiseFloor;

    public void Iteration(RunState run, List<Finding> findings)
    {
        var step = run.Step;
        var progress = ProgressState.Of(step, options);
        if (!progress.Wanders || !progress.FellFirst || progress.Alternates) return;
        var evidence = new JsonObject { ["fellDecades"] = step.FirstZ - step.LowestZ, ["improvementDecades"] = progress.Improvement, ["fallingShare"] = progress.FallingShare };
        var text = $"The residual fell {Say.Number(step.FirstZ - step.LowestZ)} decades and has wandered without progress for {StepState.ProgressWindow} iterations";
        if (step.Need is { } need && need > 0)
        {
            evidence["timesAboveTarget"] = Math.Pow(10, need);
            text += $", {Say.Number(Math.Pow(10, need))} times above its target";
        }
        if (run.DeclaredNoise is { } noise)
        {
            evidence["declaredNoise"] = noise;
            text += $"; {run.NoisiestSolver} declares a noise of {Say.Power(noise)}";
        }
        findings.Add(new Finding(Id, Severity.Warning, text + ".", evidence));
    }

    public void Advise(RunState run, Alert alert, List<Move> moves)
    {
        if (alert.Check != Id) return;
        var above = alert.Evidence["timesAboveTarget"]?.GetValue<double>() ?? 1;
        moves.Add(Moves.SolverNoiseDown(run, above));
        moves.Add(Moves.ToleranceUp(run, above));
    }
}
