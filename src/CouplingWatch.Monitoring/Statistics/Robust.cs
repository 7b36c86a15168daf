using CouplingWatch.Numerics.Sequences;

namespace CouplingWatch.Monitoring.Statistics;

/// <summary>Order statistics and the Theil–Sen slope of the latest values of a window. Nothing here allocates.</summary>
internal static class Robust
{
    private const int Longest = 64;

    /// <summary>Median of the latest <paramref name="n"/> values (at most 64); NaN when the window is empty.</summary>
    public static double Median(Window window, int n)
    {
        Span<double> latest = stackalloc double[Longest];
        return Quantile.Median(window.Latest(Math.Min(n, Longest), latest));
    }

    /// <summary>Median absolute deviation of the latest <paramref name="n"/> values (at most 64), without any factor.</summary>
    public static double Deviation(Window window, int n)
    {
        Span<double> latest = stackalloc double[Longest];
        return Quantile.MedianAbsoluteDeviation(window.Latest(Math.Min(n, Longest), latest));
    }

    /// <summary>Slope an iteration of the latest <paramref name="n"/> values (at most 16), with its band.</summary>
    public static TheilSen Slope(Window window, int n)
    {
        Span<double> latest = stackalloc double[StateWindow];
        return TheilSen.Of(window.Latest(Math.Min(n, StateWindow), latest));
    }

    private const int StateWindow = 16;
}
