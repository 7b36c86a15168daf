namespace CouplingWatch.Monitoring.Statistics;

/// <summary>Quantiles, medians and the Theil–Sen slope of short windows. Nothing here allocates.</summary>
internal static class Robust
{
    private const int LongestWindow = 64;

    /// <summary>Quantile by linear interpolation at (n − 1)p.</summary>
    /// <param name="sorted">Ascending, not empty.</param>
    /// <param name="p">0 ≤ p ≤ 1.</param>
    public static double Quantile(ReadOnlySpan<double> sorted, double p)
    {
        if (sorted.IsEmpty) return double.NaN;
        var place = (sorted.Length - 1) * p;
        var below = (int)Math.Floor(place);
        if (below + 1 >= sorted.Length) return sorted[^1];
        return sorted[below] + (place - below) * (sorted[below + 1] - sorted[below]);
    }

    /// <summary>Median; sorts <paramref name="values"/> in place. NaN when empty.</summary>
    public static double Median(Span<double> values)
    {
        values.Sort();
        return Quantile(values, 0.5);
    }

    /// <summary>Median of the latest <paramref name="n"/> values of a window; NaN when it is empty.</summary>
    public static double Median(Window window, int n)
    {
        Span<double> scratch = stackalloc double[LongestWindow];
        return Median(window.Latest(Math.Min(n, LongestWindow), scratch));
    }

    /// <summary>Median absolute deviation from the median, unscaled; overwrites <paramref name="values"/>.</summary>
    public static double MedianAbsoluteDeviation(Span<double> values, out double median)
    {
        median = Median(values);
        for (var i = 0; i < values.Length; i++) values[i] = Math.Abs(values[i] - median);
        return Median(values);
    }

    /// <summary>Median of the slopes of all pairs (Theil 1950, Sen 1968: Journal of the American Statistical Association 63, 1379–1389,
    /// DOI 10.1080/01621459.1968.10480934), with its 10 % and 90 % quantiles.</summary>
    /// <param name="a">Equally spaced values, oldest first; at most 64. Fewer than two give NaN.</param>
    public static Slope TheilSen(ReadOnlySpan<double> a)
    {
        if (a.Length > LongestWindow) a = a[^LongestWindow..];
        Span<double> slopes = stackalloc double[a.Length * (a.Length - 1) / 2];
        var n = 0;
        for (var i = 0; i < a.Length; i++)
            for (var j = i + 1; j < a.Length; j++)
                slopes[n++] = (a[j] - a[i]) / (j - i);
        slopes.Sort();
        return new Slope(Quantile(slopes, 0.5), Quantile(slopes, 0.1), Quantile(slopes, 0.9));
    }

    /// <summary>Theil–Sen slope of the latest <paramref name="n"/> values of a window.</summary>
    public static Slope TheilSen(Window window, int n)
    {
        Span<double> scratch = stackalloc double[LongestWindow];
        return TheilSen(window.Latest(Math.Min(n, LongestWindow), scratch));
    }
}

/// <param name="Value">Median of the pair slopes, per sample.</param>
/// <param name="Low">10 % quantile.</param>
/// <param name="High">90 % quantile.</param>
internal readonly record struct Slope(double Value, double Low, double High);
