using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Numerics.Spectrum;
using CouplingWatch.Numerics.Vectors;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Spectrum;

/// <summary>Ritz values of the pass on the directions seen in the latest steps. Level 3.</summary>
internal static class PassSpectrum
{
    /// <summary>An iteration whose residual is this many times the first of its step has left the neighbourhood the spectrum speaks of.</summary>
    public const double TimesFirst = 30;

    /// <summary>Null without vectors, or when nothing but tainted steps was seen.</summary>
    public static RitzValues? Of(RunState run)
    {
        if (run.Basis.Groups.Count != 1) return null;
        var ring = run.Basis.Groups[0].Vectors;
        List<double[]> d = [], w = [];
        var large = LargeNorms(ring);
        for (var i = ring.Count - 2; i >= 0 && d.Count < RitzValues.NewestPairs; i--)
        {
            var (before, after) = (ring[i], ring[i + 1]);
            if (before.Ordinal != after.Ordinal || after.Iteration != before.Iteration + 1 || run.Basis.IsTainted(after.Ordinal)) continue;
            if (!Usable(before, large) || !Usable(after, large)) continue;
            var output = new double[after.Output.Length];
            var input = new double[output.Length];
            for (var j = 0; j < output.Length; j++)
            {
                output[j] = after.Output[j] - before.Output[j];
                input[j] = output[j] - (after.Residual[j] - before.Residual[j]);
            }
            d.Add(input);
            w.Add(output);
        }
        d.Reverse();
        w.Reverse();
        return d.Count == 0 ? null : RitzValues.Of(d, w);
    }

    /// <summary>For each step kept, the norm from which on its iterations have left what the pass does near the solution.</summary>
    private static Dictionary<long, double> LargeNorms(VectorRing ring)
    {
        var large = new Dictionary<long, double>();
        for (var i = 0; i < ring.Count; i++)
            if (!large.ContainsKey(ring[i].Ordinal)) large[ring[i].Ordinal] = TimesFirst * LongVector.Norm(ring[i].Residual);
        return large;
    }

    private static bool Usable(StoredIteration iteration, Dictionary<long, double> large) =>
        iteration.Finite && LongVector.Norm(iteration.Residual) < large[iteration.Ordinal];

    /// <summary>What the page shows; null without vectors.</summary>
    public static SpectrumView? View(RunState run)
    {
        if (Of(run) is not { } ritz) return null;
        var relaxation = run.RelaxationInForce;
        var limit = RelaxationLimit.FromSpectrum(ritz);
        return new SpectrumView
        {
            Values = [.. ritz.Values.Select(v => new RitzValue(v.Real, v.Imaginary, relaxation is { } o && System.Numerics.Complex.Abs(1 - o * (1 - v)) < 1))],
            Directions = ritz.Kept,
            LambdaMin = ritz.Kept > 0 ? ritz.Smallest : null,
            LambdaMax = ritz.Kept > 0 ? ritz.Largest : null,
            RelaxationLimit = limit?.Largest,
            RelaxationBest = limit?.Best,
            RelaxationInForce = run.RelaxationInForce,
            Why = limit is not null ? null
                : !ritz.EnoughDirections ? $"{ritz.Kept} directions seen, {RitzValues.DirectionsNeeded} needed"
                : ritz.ImaginaryShare > RitzValues.ImaginaryShareAllowed ? "the values are complex: one fixed relaxation does not tame them"
                : "a value at or above 1: no fixed relaxation tames it",
        };
    }
}
