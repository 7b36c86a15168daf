using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Numerics.Spectrum;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Spectrum;

/// <summary>The largest and the best fixed relaxation, and what they rest on.</summary>
/// <param name="Ground">Completes "the most …": "the directions seen tolerate".</param>
/// <param name="Factor">Factor an iteration the best relaxation leaves on the directions seen; null when not known.</param>
internal sealed record RelaxationLimit(double Largest, double Best, string Ground, bool FromDirections, double? Factor)
{
    /// <summary>Iterations of growth looked at.</summary>
    private const int GrowthWindow = 5;

    /// <summary>Null when too few directions were seen, values are complex or one lies at or above 1.</summary>
    public static RelaxationLimit? FromSpectrum(RitzValues ritz)
    {
        if (ritz.RelaxationLimit is not { } largest || ritz.RelaxationOptimum is not { } best) return null;
        var factor = Math.Max(Math.Abs(1 - best * (1 - ritz.Smallest)), Math.Abs(1 - best * (1 - ritz.Largest)));
        return new RelaxationLimit(largest, best, "the directions seen tolerate", true, factor);
    }

    /// <summary>From the growth under fixed relaxation ω: with the alternating factor −ρ of the dominant direction, 1 − ω(1 − λ) = −ρ,
    /// so the largest relaxation is 2ω/(1 + ρ) and the best for that direction alone ω/(1 + ρ).</summary>
    /// <returns>Null unless the method is fixed relaxation and the residual grows.</returns>
    public static RelaxationLimit? FromGrowth(RunState run)
    {
        if (run.Settings.Method != CouplingMethod.Fixed || run.RelaxationInForce is not { } relaxation || run.Step.Z.Count < GrowthWindow || run.Step.HasNotFinite) return null;
        var slope = Robust.Slope(run.Step.Z, GrowthWindow).Slope;
        if (!(slope > 0)) return null;
        var growth = Math.Pow(10, slope);
        return new RelaxationLimit(2 * relaxation / (1 + growth), relaxation / (1 + growth), "its growth allows", false, null);
    }
}

/// <summary>The limit as the judgement sees it; worked out anew every few iterations only, as it costs a decomposition.</summary>
internal sealed class RelaxationMemory
{
    private const int Iterations = 4;

    /// <summary>A residual this far above its start no longer tells how the pass behaves near the solution: what was known before stands.</summary>
    private const double FarDecades = 2;

    private RelaxationLimit? limit;
    private long ordinal = -1;
    private int iteration;

    public RelaxationLimit? Of(RunState run)
    {
        var step = run.Step;
        if (limit is { FromDirections: true } && ordinal == step.Ordinal && step.Iteration >= iteration && step.Iteration - iteration < Iterations) return limit;
        if (limit is not null && ordinal == step.Ordinal && !(step.Z.Count > 0 && step.Z[0] < step.FirstZ + FarDecades)) return limit;
        (ordinal, iteration) = (step.Ordinal, step.Iteration);
        return limit = (PassSpectrum.Of(run) is { } ritz ? RelaxationLimit.FromSpectrum(ritz) : null) ?? RelaxationLimit.FromGrowth(run);
    }
}
