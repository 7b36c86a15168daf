using System.Buffers;

namespace CouplingWatch.Numerics.Sequences;

/// <summary>
/// Slope of a sequence as the median of all pairwise slopes, with the 10 % and 90 % quantiles of those as its band: up to
/// 29 % of the values may be wild. Cost n²·log n; up to 16 values cost no allocation. Results are NaN for fewer than two
/// values or when a value is NaN.
/// Source: "Estimates of the regression coefficient based on Kendall's tau", Journal of the American Statistical Association
/// 63 (1968) 1379–1389 (from memory).
/// </summary>
/// <param name="Slope">Change per place (or per unit of x).</param>
/// <param name="Low">10 % quantile of the pairwise slopes.</param>
/// <param name="High">90 % quantile of the pairwise slopes.</param>
/// <param name="Intercept">Median of y − slope · median of x.</param>
public readonly record struct TheilSen(double Slope, double Low, double High, double Intercept)
{
    private const int OnStack = 120;

    /// <summary>Fit of values at the places 0, 1, 2, …</summary>
    public static TheilSen Of(ReadOnlySpan<double> y) => Fit(default, y);

    /// <summary>Fit of values at given places; pairs at one place do not count.</summary>
    /// <exception cref="ArgumentException">The lengths differ.</exception>
    public static TheilSen Of(ReadOnlySpan<double> x, ReadOnlySpan<double> y)
    {
        if (x.Length != y.Length) throw new ArgumentException($"{x.Length} places for {y.Length} values", nameof(x));
        return Fit(x, y);
    }

    /// <summary>The slope alone.</summary>
    public static double SlopeOf(ReadOnlySpan<double> y)
    {
        int n = y.Length, pairs = n * (n - 1) / 2;
        double[]? rented = null;
        Span<double> slopes = pairs <= OnStack ? stackalloc double[OnStack] : rented = ArrayPool<double>.Shared.Rent(pairs);
        int count = Slopes(default, y, slopes);
        slopes[..count].Sort();
        double result = Quantile.OfSorted(slopes[..count], 0.5);
        if (rented is not null) ArrayPool<double>.Shared.Return(rented);
        return result;
    }

    private static TheilSen Fit(ReadOnlySpan<double> x, ReadOnlySpan<double> y)
    {
        int n = y.Length, pairs = n * (n - 1) / 2;
        double[]? rented = null;
        Span<double> slopes = pairs <= OnStack ? stackalloc double[OnStack] : rented = ArrayPool<double>.Shared.Rent(pairs);
        int count = Slopes(x, y, slopes);
        Span<double> rising = slopes[..count];
        rising.Sort();
        double slope = Quantile.OfSorted(rising, 0.5);
        double middle = x.IsEmpty ? (n - 1) / 2.0 : Quantile.Median(x);
        var result = new TheilSen(slope, Quantile.OfSorted(rising, 0.1), Quantile.OfSorted(rising, 0.9), Quantile.Median(y) - (slope * middle));
        if (rented is not null) ArrayPool<double>.Shared.Return(rented);
        return result;
    }

    private static int Slopes(ReadOnlySpan<double> x, ReadOnlySpan<double> y, Span<double> slopes)
    {
        int count = 0;
        for (int i = 0; i < y.Length; i++)
        {
            for (int j = i + 1; j < y.Length; j++)
            {
                double run = x.IsEmpty ? j - i : x[j] - x[i];
                if (run != 0) slopes[count++] = (y[j] - y[i]) / run;
            }
        }
        return count;
    }
}
