using System.Globalization;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Charts;

/// <summary>The condition number of the kept columns over the latest iterations. Shown, never alarmed on.</summary>
public static class ConditionChart
{
    /// <summary>log10 κ (unit columns, else as they are) over the iterations in their order; with declared noise the other axis shows κ × noise.</summary>
    public static LineChartSpec Of(IReadOnlyList<ConditionPoint> points, double? declaredNoise)
    {
        ArgumentNullException.ThrowIfNull(points);
        var drawn = points.Select((p, i) => new ChartPoint(i, Height(p), Text: Reading(p))).ToArray();
        var y = NiceAxis.Decades(drawn.Where(p => p.Y is not null).Select(p => p.Y!.Value).Append(0), least: 6);
        if (declaredNoise is > 0 and var noise)
            y = y with { Opposite = [.. Enumerable.Range(0, y.Ticks + 1).Select(i => Error(Math.Pow(10, y.Low + i * (y.High - y.Low) / y.Ticks) * noise))] };
        var ends = points.Count == 0 ? new[] { "", "" } : [$"step {points[0].Step}", $"step {points[^1].Step}, now"];
        return new LineChartSpec
        {
            X = new ChartAxis(0, Math.Max(1, points.Count - 1), 1, ends),
            Y = y,
            Series = [new ChartSeries(SeriesRole.Path, drawn)],
        };
    }

    public static string InWords(IReadOnlyList<ConditionPoint> points)
    {
        var known = points.Select(p => p.Unit ?? p.Raw).Where(v => v is not null).Select(v => v!.Value).ToArray();
        return known.Length == 0
            ? "Condition over time: no basis of one column or more yet"
            : $"Condition over the latest {Numbers.Count(known.Length, "iteration")}: {Numbers.Power(known.Min())} to {Numbers.Power(known.Max())}, now {Numbers.Power(known[^1])}";
    }

    public static IReadOnlyList<string> Columns { get; } = ["step, iteration", "κ as it is", "κ, unit columns", "coefficient error, at most"];

    public static IReadOnlyList<IReadOnlyList<string>> Rows(IReadOnlyList<ConditionPoint> points) =>
        [.. points.Reverse().Select(p => new[] { $"{p.Step}, {p.Iteration}", Numbers.Power(p.Raw, 4), Numbers.Power(p.Unit, 4), Numbers.Power(p.CoefficientError, 2) })];

    private static string Error(double value) => Math.Abs(value - 1) < 1e-9 ? "1" : Numbers.Power(value, 1);

    private static double? Height(ConditionPoint p) => (p.Unit ?? p.Raw) is { } k && double.IsFinite(k) && k > 0 ? Math.Log10(k) : null;

    private static string Reading(ConditionPoint p) =>
        string.Create(CultureInfo.InvariantCulture, $"step {p.Step}, iteration {p.Iteration}: κ {Numbers.Power(p.Unit ?? p.Raw, 4)}");
}
