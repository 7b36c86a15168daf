using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Divergence;

/// <summary>The residual is not a number, the code gave up on the step, or the residual grows and keeps growing. Level 0.</summary>
internal sealed class DivergenceCheck(DivergenceOptions options) : ICheck
{
    public string Id => CheckIds.Divergence;

    public void Iteration(RunState run, List<Finding> findings)
    {
        if (run.Fields.NotFinite) findings.Add(NotFinite(run));
        else if (Grows(run.Step, out var slope)) findings.Add(Grown(run, slope));
    }

    public void StepClosed(RunState run, in ClosedStep step, List<Finding> findings)
    {
        if (step.Outcome != StepOutcome.Failed) return;
        var evidence = new JsonObject { ["outcome"] = "failed", ["iterations"] = step.Iterations };
        if (double.IsFinite(step.LastNorm)) evidence["lastNorm"] = step.LastNorm;
        findings.Add(new Finding(Id, Severity.Critical,
            $"The code gave up on step {step.Step} after {Say.Count(step.Iterations, "iteration", "iterations")}; its last residual norm is {Say.Number(step.LastNorm)}.",
            evidence, Certain: true));
    }

    public void Advise(RunState run, Alert alert, List<Move> moves)
    {
        if (alert.Check != Id) return;
        if (run.UsesSecants)
        {
            if (run.StepsConverged > 0 && Moves.TimeStepDown(run) is { } timeStep) moves.Add(timeStep);
            if (run.StepsConverged > 0 && Moves.DropHistory(run) is { } drop) moves.Add(drop);
            return;
        }
        if (Moves.RelaxationDown(run) is { } relaxation) moves.Add(relaxation);
        if (Moves.ToQuasiNewton(run) is { } method) moves.Add(method);
        if (run.StepsConverged > 0 && Moves.TimeStepDown(run) is { } smaller) moves.Add(smaller);
    }

    private bool Grows(StepState step, out double slope)
    {
        slope = double.NaN;
        if (step.Last < options.FirstIteration || step.Done || step.HasNotFinite) return false;
        var z = step.Z[0];
        if (!(z - step.LowestZ > options.GrowthDecades) || !(z > step.FirstZ + options.AboveStartDecades)) return false;
        if (z < step.HighestZ - options.BelowHighestDecades || step.Last - step.LowestAt < options.LowestIterationsBack) return false;
        slope = Robust.Slope(step.Z, options.SlopeWindow).Slope;
        return slope > options.LeastSlope;
    }

    private Finding Grown(RunState run, double slope)
    {
        var step = run.Step;
        var growth = Math.Pow(10, step.Z[0] - step.LowestZ);
        var evidence = new JsonObject
        {
            ["growth"] = growth,
            ["lowestIteration"] = step.LowestAt,
            ["factorPerIteration"] = Math.Pow(10, slope),
            ["norm"] = run.Fields.Norm,
        };
        var text = $"The residual has grown {Say.Number(growth)}-fold since iteration {step.LowestAt}, {Say.Number(Math.Pow(10, slope))}-fold an iteration";
        if (run.Settings.Method == CouplingMethod.Fixed && run.RelaxationLimit is { } limit && run.RelaxationInForce is { } relaxation && relaxation > limit.Largest)
        {
            evidence["relaxation"] = relaxation;
            evidence["relaxationLimit"] = limit.Largest;
            text += $"; relaxation {Say.Number(relaxation)} is above {Say.Number(limit.Largest)}, the most {limit.Ground}";
        }
        return new Finding(Id, Severity.Critical, text + ".", evidence, Certain: true);
    }

    private Finding NotFinite(RunState run)
    {
        var field = "";
        foreach (var f in run.Fields.All)
            if (f.Sent && !double.IsFinite(f.Residual)) field = f.Name;
        var evidence = new JsonObject { ["field"] = field, ["iteration"] = run.Step.Iteration };
        return new Finding(Id, Severity.Critical,
            $"The residual of {field} is {(double.IsNaN(run.Fields.Find(field)?.Residual ?? double.NaN) ? "not a number" : "infinite")} at iteration {run.Step.Iteration} of step {run.Step.Step}: a solver returned no usable output.",
            evidence, Certain: true);
    }
}
