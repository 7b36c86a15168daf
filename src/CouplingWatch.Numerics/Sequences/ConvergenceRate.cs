namespace CouplingWatch.Numerics.Sequences;

/// <summary>
/// Rates of a fixed-point iteration: signed (negative when successive increments oppose each other), from a few increments.
/// </summary>
public static class ConvergenceRate
{
    /// <summary>Signed rate from two successive increments (or residuals) of a vector iteration.</summary>
    /// <param name="previousNorm">Norm of the earlier one.</param>
    /// <param name="norm">Norm of the later one.</param>
    /// <param name="cosine">Cosine of the angle between them, −1 to 1; only its sign counts.</param>
    /// <returns>norm/previousNorm, with the sign of the cosine; NaN when previousNorm is not above 0 or anything is not finite.</returns>
    public static double Signed(double previousNorm, double norm, double cosine)
    {
        if (!(previousNorm > 0) || !double.IsFinite(previousNorm) || !double.IsFinite(norm) || double.IsNaN(cosine)) return double.NaN;
        return cosine < 0 ? -norm / previousNorm : norm / previousNorm;
    }

    /// <summary>
    /// Signed rate of a sequence of norms with the cosines between neighbours: the magnitude is 10 to the Theil–Sen slope of
    /// log10 of the norms, the sign that of the median cosine.
    /// </summary>
    /// <param name="norms">Two or more, above 0.</param>
    /// <param name="cosines">cosines[i] between i and i + 1; one less than the norms.</param>
    /// <returns>NaN when a norm is 0 or not finite.</returns>
    public static double Signed(ReadOnlySpan<double> norms, ReadOnlySpan<double> cosines)
    {
        if (norms.Length < 2) throw new ArgumentException($"{norms.Length} norms, at least 2 needed", nameof(norms));
        if (cosines.Length != norms.Length - 1) throw new ArgumentException($"{cosines.Length} cosines, {norms.Length - 1} needed", nameof(cosines));
        Span<double> logs = norms.Length <= 64 ? stackalloc double[norms.Length] : new double[norms.Length];
        for (int i = 0; i < norms.Length; i++)
        {
            if (!(norms[i] > 0) || !double.IsFinite(norms[i])) return double.NaN;
            logs[i] = Math.Log10(norms[i]);
        }
        double magnitude = Math.Pow(10, TheilSen.SlopeOf(logs));
        double cosine = Quantile.Median(cosines);
        return double.IsNaN(cosine) ? double.NaN : cosine < 0 ? -magnitude : magnitude;
    }

    /// <summary>Signed rate of a scalar sequence x₀, x₁, x₂ …: quotient of its last two increments; NaN with fewer than three values or when the last but one is 0.</summary>
    public static double Signed(ReadOnlySpan<double> sequence)
    {
        if (sequence.Length < 3) return double.NaN;
        double earlier = sequence[^2] - sequence[^3], later = sequence[^1] - sequence[^2];
        return earlier == 0 ? double.NaN : later / earlier;
    }
}
