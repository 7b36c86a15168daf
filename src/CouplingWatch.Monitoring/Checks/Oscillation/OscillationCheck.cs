using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Oscillation;

/// <summary>When an alternating residual counts as a fault.</summary>
public sealed record OscillationOptions
{
    public const double DefaultCosineBelow = -0.6;
    public const double DefaultFactorAbove = 0.8;

    /// <summary>All of the last four cosines lie below this; −1…0.</summary>
    public double CosineBelow { get; init; } = DefaultCosineBelow;
    /// <summary>The residual falls no faster than by this factor an iteration; 0…1.</summary>
    public double FactorAbove { get; init; } = DefaultFactorAbove;

    internal void Validate(OptionFaults faults)
    {
        faults.Range("Oscillation.CosineBelow", CosineBelow, -1, 0);
        faults.Range("Oscillation.FactorAbove", FactorAbove, 0.001, 1);
    }
}

/// <summary>Under fixed relaxation the residual changes sign at each iteration and hardly falls: the relaxation overshoots. Level 3.</summary>
internal sealed class OscillationCheck(OscillationOptions options) : ICheck
{
    private const int Latest = 4;
    private const int SlopeWindow = 5;

    public string Id => CheckIds.Oscillation;

    public void Iteration(RunState run, List<Finding> findings)
    {
        var step = run.Step;
        if (run.Settings.Method != CouplingMethod.Fixed || step.Done || step.HasNotFinite || step.Cosines.Count < Latest) return;
        for (var i = 0; i < Latest; i++)
            if (!(step.Cosines[i] < options.CosineBelow)) return;
        var slope = Robust.Slope(step.Z, SlopeWindow).Slope;
        if (!(slope > Math.Log10(options.FactorAbove))) return;
        var factor = Math.Pow(10, slope);
        var evidence = new JsonObject { ["cosine"] = step.Cosines[0], ["factorPerIteration"] = factor };
        var text = $"The residual changes sign at each iteration and keeps {Say.Number(100 * factor)} % of its size";
        if (run.RelaxationInForce is { } relaxation)
        {
            evidence["relaxation"] = relaxation;
            text += $" under relaxation {Say.Number(relaxation)}";
            if (run.RelaxationLimit is { } limit)
            {
                evidence["relaxationBest"] = limit.Best;
                evidence["relaxationLimit"] = limit.Largest;
                if (relaxation > limit.Largest) text += $", which is above {Say.Number(limit.Largest)}, the most {limit.Ground}";
            }
        }
        findings.Add(new Finding(Id, Severity.Warning, text + ".", evidence));
    }

    public void Advise(RunState run, Alert alert, List<Move> moves)
    {
        if (alert.Check != Id) return;
        if (Moves.RelaxationDown(run) is { } relaxation) moves.Add(relaxation);
        if (Moves.ToQuasiNewton(run) is { } method) moves.Add(method);
    }

    public NotJudged? Lacks(RunState run) => run.Settings.Method == CouplingMethod.Fixed ? BasisLack.OfVectors(run, Id) : null;
}
