using System.Buffers;

namespace CouplingWatch.Numerics.Sequences;

/// <summary>
/// Order statistics of short sequences. Quantiles interpolate linearly at (n − 1)·p. Values must not be NaN: a NaN anywhere
/// makes the result NaN; an empty sequence gives NaN. The input is not changed; up to 128 values cost no allocation.
/// </summary>
public static class Quantile
{
    private const int OnStack = 128;

    /// <summary>Factor that turns a MAD into the standard deviation of a normal sequence.</summary>
    public const double MadToSigma = 1.4826;

    /// <summary>The p-quantile, 0 ≤ p ≤ 1. Cost n·log n.</summary>
    public static double Of(ReadOnlySpan<double> values, double p)
    {
        if (!(p >= 0 && p <= 1)) throw new ArgumentOutOfRangeException(nameof(p), p, "must be 0 to 1");
        if (values.IsEmpty) return double.NaN;
        double[]? rented = null;
        Span<double> work = values.Length <= OnStack ? stackalloc double[OnStack] : rented = ArrayPool<double>.Shared.Rent(values.Length);
        work = work[..values.Length];
        values.CopyTo(work);
        work.Sort();
        double result = OfSorted(work, p);
        if (rented is not null) ArrayPool<double>.Shared.Return(rented);
        return result;
    }

    /// <summary>The p-quantile of values that rise already (NaN, if any, first).</summary>
    public static double OfSorted(ReadOnlySpan<double> rising, double p)
    {
        if (!(p >= 0 && p <= 1)) throw new ArgumentOutOfRangeException(nameof(p), p, "must be 0 to 1");
        if (rising.IsEmpty || double.IsNaN(rising[0])) return double.NaN;
        double place = (rising.Length - 1) * p;
        int below = Math.Min((int)place, rising.Length - 1);
        int above = Math.Min(below + 1, rising.Length - 1);
        double share = place - below;
        return share == 0 || rising[below] == rising[above] ? rising[below] : rising[below] + (share * (rising[above] - rising[below]));
    }

    /// <summary>The median: mean of the middle two for an even count.</summary>
    public static double Median(ReadOnlySpan<double> values) => Of(values, 0.5);

    /// <summary>Median of the distances from the median, without any factor.</summary>
    public static double MedianAbsoluteDeviation(ReadOnlySpan<double> values)
    {
        double median = Median(values);
        if (!double.IsFinite(median)) return double.NaN;
        double[]? rented = null;
        Span<double> work = values.Length <= OnStack ? stackalloc double[OnStack] : rented = ArrayPool<double>.Shared.Rent(values.Length);
        work = work[..values.Length];
        for (int i = 0; i < values.Length; i++) work[i] = Math.Abs(values[i] - median);
        work.Sort();
        double result = OfSorted(work, 0.5);
        if (rented is not null) ArrayPool<double>.Shared.Return(rented);
        return result;
    }
}
