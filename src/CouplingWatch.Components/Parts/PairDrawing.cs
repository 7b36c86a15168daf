using CouplingWatch.Wire;

namespace CouplingWatch.Components.Parts;

/// <summary>One pair of dashes: where it stands and how far apart its two sides are (0…1 of the height); one dash when the pass met the target.</summary>
public readonly record struct DrawnPair(double X, double Gap, bool Single);

/// <summary>
/// The step in progress as pairs of dashes, newest at the seam. The gap is the need against seven decades (or the largest need where that is
/// more); where the residual itself grew, the gap follows the norm, because the need stays flat when a run explodes. Pure.
/// </summary>
public static class PairDrawing
{
    /// <summary>Most pairs drawn; older ones become three dots.</summary>
    public const int MostPairs = 14;

    public const double Width = 134, Dash = 6.4, Pitch = 9;

    /// <summary>The pairs, oldest first, right-aligned in a width of 134.</summary>
    public static IReadOnlyList<DrawnPair> Of(IReadOnlyList<PassPair> passes)
    {
        ArgumentNullException.ThrowIfNull(passes);
        var heights = Growth(passes);
        var whole = Math.Max(7, heights.DefaultIfEmpty(0).Max());
        var from = Math.Max(0, passes.Count - MostPairs);
        var pairs = new List<DrawnPair>(passes.Count - from);
        for (var i = from; i < passes.Count; i++)
        {
            var x = Width - Dash - 2.6 - (passes.Count - 1 - i) * Pitch;
            pairs.Add(new DrawnPair(x, Math.Clamp(heights[i] / whole, 0, 1), passes[i].Done));
        }
        return pairs;
    }

    /// <summary>
    /// Decades above the target for each pass. Where the need is unknown, or the norm has grown by more than the need did, the growth of
    /// the norm since its least value is used instead, so that an exploding step opens.
    /// </summary>
    public static IReadOnlyList<double> Growth(IReadOnlyList<PassPair> passes)
    {
        ArgumentNullException.ThrowIfNull(passes);
        var heights = new double[passes.Count];
        var least = double.PositiveInfinity;
        var atLeast = 0;
        for (var i = 0; i < passes.Count; i++)
        {
            var z = Finite(passes[i].LogNorm, least);
            if (z < least) (least, atLeast) = (z, i);
            var need = passes[i].Need is { } y && double.IsFinite(y) ? Math.Max(0, y) : (double?)null;
            var grown = (passes[atLeast].Need is { } y0 && double.IsFinite(y0) ? Math.Max(0, y0) : 1) + (z - least);
            heights[i] = need is { } n ? Math.Max(n, z - least > 0.3 ? grown : n) : grown;
        }
        return heights;
    }

    /// <summary>A residual that is not a number counts as four decades above the least one seen.</summary>
    private static double Finite(double z, double least) =>
        double.IsFinite(z) ? z : double.IsNegativeInfinity(z) ? -300 : (double.IsFinite(least) ? least : 0) + 4;
}
