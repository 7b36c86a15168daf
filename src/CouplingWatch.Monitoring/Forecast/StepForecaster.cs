using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Numerics.Sequences;

namespace CouplingWatch.Monitoring.Forecast;

/// <summary>How many iterations the step in progress still takes: from the paths of earlier steps, else from the rate.</summary>
internal static class StepForecaster
{
    /// <summary>From which iteration on it speaks.</summary>
    public const int FirstIteration = 2;

    /// <summary>How many paths must have passed the present need.</summary>
    public const int LeastPaths = 5;

    /// <summary>Decades an iteration the need must fall by, at least, for the rate to foretell anything.</summary>
    public const double LeastFall = 1e-3;

    /// <summary>The window of the rate.</summary>
    public const int RateWindow = 6;

    /// <summary>Null when nothing can be foretold.</summary>
    public static Remaining? Foretell(StepState step, PathBook paths)
    {
        if (step.Last < FirstIteration || step.Need is not { } need || step.HasNotFinite) return null;
        if (step.Done) return new Remaining(0, null, null, true);
        Span<double> scratch = stackalloc double[PathBook.Capacity];
        var lengths = paths.Remaining(need, scratch);
        if (lengths.Length >= LeastPaths)
        {
            lengths.Sort();
            return new Remaining(Quantile.OfSorted(lengths, 0.5), Quantile.OfSorted(lengths, 0.1), Quantile.OfSorted(lengths, 0.9), true);
        }
        if (step.Needs.Count < 2) return null;
        var slope = Robust.Slope(step.Needs, RateWindow);
        if (!(slope.Slope < -LeastFall)) return null;
        return new Remaining(need / -slope.Slope, slope.Low < 0 ? need / -slope.Low : null, slope.High < -LeastFall ? need / -slope.High : null, false);
    }
}

/// <param name="Iterations">Median, or from the rate.</param>
/// <param name="Low">10 % quantile (or from the steepest slope); null when unknown.</param>
/// <param name="High">90 % quantile (or from the flattest slope); null when unknown.</param>
/// <param name="FromPaths">From earlier steps rather than from the rate.</param>
internal readonly record struct Remaining(double Iterations, double? Low, double? High, bool FromPaths);
