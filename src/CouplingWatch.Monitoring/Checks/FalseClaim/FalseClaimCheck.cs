using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.FalseClaim;

/// <summary>How far above the declared tolerance a step may be called converged.</summary>
public sealed record FalseClaimOptions
{
    public const double DefaultAllowedRatio = 1.05;

    /// <summary>Residual over tolerance; 1…100.</summary>
    public double AllowedRatio { get; init; } = DefaultAllowedRatio;

    internal void Validate(OptionFaults faults) => faults.Range("FalseClaim.AllowedRatio", AllowedRatio, 1, 100);
}

/// <summary>The code calls a step converged whose residual lies above the declared tolerance. Level 1, or level 0 with targets.</summary>
internal sealed class FalseClaimCheck(FalseClaimOptions options) : ICheck
{
    public string Id => CheckIds.FalseClaim;

    public void StepClosed(RunState run, in ClosedStep step, List<Finding> findings)
    {
        if (!step.Converged || !run.SendsStepRecords || !step.Complete) return;
        FieldState? worst = null;
        foreach (var field in run.Fields.All)
            if (field.Sent && !field.Inferred && field.Need is { } need && !(need <= worst?.Need)) worst = field;
        if (worst is null || !(worst.Need > Math.Log10(options.AllowedRatio))) return;
        var ratio = Math.Pow(10, worst.Need.Value);
        var evidence = new JsonObject { ["field"] = worst.Name, ["ratio"] = ratio, ["residual"] = worst.Residual, ["tolerance"] = worst.Tolerance };
        findings.Add(new Finding(Id, Severity.Warning,
            $"Step {step.Step} was called converged with the residual of {worst.Name} at {Say.Number(worst.Residual)}, {Say.Number(ratio)} times the declared tolerance of {Say.Number(worst.Tolerance ?? 0)}.",
            evidence));
    }

    public void Advise(RunState run, Alert alert, List<Move> moves)
    {
        if (alert.Check != Id) return;
        moves.Add(new Move
        {
            Setting = "tolerance",
            Direction = "change",
            AltersResult = true,
            Text = "let the code stop on the tolerance it declares, or declare the one it stops on",
        });
    }

    public NotJudged? Lacks(RunState run)
    {
        foreach (var field in run.Fields.All)
            if (field.DeclaredTolerance) return null;
        return run.Iterations == 0 ? null : new NotJudged(Id, "the tolerance is only inferred from what the code accepted before", "magnitudes with each iteration, or targets");
    }
}
