using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Spectrum;

/// <summary>The largest and the best fixed relaxation, and what they rest on.</summary>
/// <param name="Ground">Completes "the most …": "the directions seen tolerate".</param>
/// <param name="FromSpectrum">From the directions seen (level 3), not only from the growth of the residual.</param>
internal sealed record RelaxationLimit(double Largest, double Best, string Ground, bool FromSpectrum)
{
    /// <summary>From the growth under fixed relaxation ω: with the alternating factor −ρ of the dominant direction, 1 − ω(1 − λ) = −ρ,
    /// so the largest relaxation is 2ω/(1 + ρ) and the best for that direction ω/(1 + ρ).</summary>
    /// <returns>Null unless the method is fixed relaxation and the residual grows.</returns>
    public static RelaxationLimit? FromGrowth(RunState run)
    {
        if (run.Settings.Method != CouplingMethod.Fixed || run.RelaxationInForce is not { } relaxation || run.Step.Z.Count < 5) return null;
        var slope = Robust.Slope(run.Step.Z, 5).Slope;
        if (!(slope > 0)) return null;
        var growth = Math.Pow(10, slope);
        return new RelaxationLimit(2 * relaxation / (1 + growth), relaxation / (1 + growth), "its growth allows", false);
    }
}
