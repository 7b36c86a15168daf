namespace CouplingWatch.Numerics.Conditioning;

/// <summary>Singular values and left singular vectors of [a b; 0 d] with a, d ≥ 0, without cancellation.</summary>
internal static class TwoByTwo
{
    private const double Rounding = 4 * 2.22e-16;

    /// <summary>
    /// The asked singular value and its unit left vector. Without coupling the vectors are the axes; of two equal values the
    /// smallest goes to the second axis and the largest to the first, so that a tie falls the same way everywhere.
    /// </summary>
    internal static (double Value, double First, double Second) LeftVector(double a, double b, double d, bool smallest)
    {
        double scale = Math.Max(Math.Abs(b), Math.Max(a, d));
        if (scale == 0) return (0, 1, 0);
        a /= scale;
        b /= scale;
        d /= scale;
        if (Math.Abs(b) <= Rounding)
        {
            bool secondIsSmall = d <= a * (1 + Rounding);
            double value = (smallest ? Math.Min(a, d) : Math.Max(a, d)) * scale;
            return secondIsSmall == smallest ? (value, 0, 1) : (value, 1, 0);
        }

        // σ_max ± σ_min are the lengths of two right triangles; σ_max·σ_min = a·d.
        double large = (double.Hypot(a + d, b) + double.Hypot(a - d, b)) / 2;
        double small = Math.Min(a * d / large, Math.Min(a, d));

        // The vector of the smallest value is orthogonal to the rows of M·Mᵀ − σ_min²·I; take the longer row.
        double upper = ((a - small) * (a + small)) + (b * b), cross = b * d, lower = (d - small) * (d + small);
        (double first, double second) = double.Hypot(upper, cross) >= double.Hypot(cross, lower) ? (-cross, upper) : (lower, -cross);
        double length = double.Hypot(first, second);
        if (length == 0) (first, second, length) = (1, 0, 1);
        first /= length;
        second /= length;
        return smallest ? (small * scale, first, second) : (large * scale, -second, first);
    }
}
