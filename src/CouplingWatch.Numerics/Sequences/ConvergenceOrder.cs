namespace CouplingWatch.Numerics.Sequences;

/// <summary>
/// Order p of convergence from three successive increments or errors: log(d₃/d₂)/log(d₂/d₁).
/// Source of the definitions: Kelley, Iterative Methods for Linear and Nonlinear Equations, SIAM 1995, §4.1 (from memory).
/// </summary>
public static class ConvergenceOrder
{
    /// <summary>Below this share of the iterate an increment is rounding and no order is named.</summary>
    public const double RoundingShare = 1e-14;

    /// <summary>The order, or NaN when it cannot be told: not falling, zero, not finite, or lost in rounding.</summary>
    /// <param name="d1">Oldest increment, a magnitude.</param>
    /// <param name="d2">Next one.</param>
    /// <param name="d3">Newest.</param>
    /// <param name="scale">Magnitude of the iterate, for the rounding limit; 0 switches that off.</param>
    public static double Of(double d1, double d2, double d3, double scale)
    {
        if (!(scale >= 0)) throw new ArgumentOutOfRangeException(nameof(scale), scale, "must be 0 or more");
        if (!double.IsFinite(d1) || !(d1 > d2) || !(d2 > d3) || !(d3 > 0)) return double.NaN;
        if (d3 < RoundingShare * scale) return double.NaN;
        return Math.Log(d3 / d2) / Math.Log(d2 / d1);
    }
}
