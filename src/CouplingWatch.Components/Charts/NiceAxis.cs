using System.Globalization;
using CouplingWatch.Components.Formatting;

namespace CouplingWatch.Components.Charts;

/// <summary>Axes that end on round numbers and change seldom while data come in.</summary>
public static class NiceAxis
{
    private static readonly int[] Steps = [1, 2, 5, 10, 15, 20, 25, 50];

    /// <summary>Iterations or steps from 0: the smallest round end at or above <paramref name="last"/>, at most eight intervals.</summary>
    /// <param name="last">Largest index to be shown; below 4 counts as 4.</param>
    public static ChartAxis Counts(double last)
    {
        var need = Math.Max(4, double.IsFinite(last) ? Math.Ceiling(last) : 4);
        double step = 0;
        for (double scale = 1; step == 0; scale *= 100)
            step = Steps.Select(s => s * scale).FirstOrDefault(s => need / s <= 8);
        var ticks = (int)Math.Ceiling(need / step);
        return new ChartAxis(0, ticks * step, ticks, [.. Enumerable.Range(0, ticks + 1).Select(i => (i * step).ToString("0", CultureInfo.InvariantCulture))]);
    }

    /// <summary>Decades that hold every finite value, on even powers, at most eight intervals.</summary>
    /// <param name="log10Values">log10 of the data; values that are not finite are passed over.</param>
    /// <param name="least">Decades shown at least.</param>
    public static ChartAxis Decades(IEnumerable<double> log10Values, int least = 4)
    {
        ArgumentNullException.ThrowIfNull(log10Values);
        double low = double.PositiveInfinity, high = double.NegativeInfinity;
        foreach (var value in log10Values)
        {
            if (!double.IsFinite(value)) continue;
            low = Math.Min(low, value);
            high = Math.Max(high, value);
        }
        if (low > high) (low, high) = (-least / 2.0, least / 2.0);
        var step = 2.0;
        while ((Math.Ceiling(high / step) - Math.Floor(low / step)) > 8) step *= 2;
        var from = Math.Floor(low / step) * step;
        var to = Math.Max(Math.Ceiling(high / step) * step, from + Math.Ceiling(least / step) * step);
        var ticks = (int)Math.Round((to - from) / step);
        return new ChartAxis(from, to, ticks, [.. Enumerable.Range(0, ticks + 1).Select(i => Power((int)(from + i * step)))]);
    }

    private static string Power(int power) => power == 0 ? "1" : Numbers.TenTo(power);
}
