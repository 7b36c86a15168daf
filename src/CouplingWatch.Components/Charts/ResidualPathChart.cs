using System.Globalization;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Charts;

/// <summary>The residual of one field in the step in progress over the band of earlier steps, as a plot, in words and as a table.</summary>
public static class ResidualPathChart
{
    /// <summary>log10(norm ÷ target) over the iterations; log10 of the norm where no target is known (then without target, band and cone).</summary>
    /// <param name="path">The field; values that are not finite leave a gap.</param>
    /// <param name="forecast">Iterations still to do; drawn only for the field that governs. Null: no cone.</param>
    public static LineChartSpec Of(FieldPath path, StepForecast? forecast)
    {
        ArgumentNullException.ThrowIfNull(path);
        var judged = Judged(path);
        var points = path.Points.Select(p => new ChartPoint(p.Iteration, Height(p, judged), Text: Reading(path, p))).ToArray();
        var band = judged ? path.Band.Where(b => double.IsFinite(b.Low) && double.IsFinite(b.High)).Select(b => new ChartPoint(b.Iteration, b.Low, b.High)).ToArray() : [];
        var cone = judged && path.Governs && forecast is { Need: > 0 } f && double.IsFinite(f.Remaining) ? f : null;

        var now = path.Points.Count > 0 ? path.Points[^1].Iteration : -1;
        var x = NiceAxis.Counts(Last(path, band, cone));
        var second = Explodes(path, judged);
        var y = NiceAxis.Decades(Heights(points).Concat(Heights(second ?? [])).Concat(band.SelectMany(b => new[] { b.Y!.Value, b.Top!.Value })).Concat(judged ? [0, -1] : []));

        var series = new List<ChartSeries>();
        if (band.Length > 0) series.Add(new(SeriesRole.Band, band));
        if (cone is { Low: { } low, High: { } high } && high > low)
            series.Add(new(SeriesRole.Cone, Cone(cone.AtIteration, cone.Need, low, high)));
        if (cone is not null)
            series.Add(new(SeriesRole.Median, [new(cone.AtIteration, cone.Need), new(cone.AtIteration + cone.Remaining, 0)]));
        if (second is not null) series.Add(new(SeriesRole.Second, second));
        series.Add(new(SeriesRole.Path, points, Dots: points.Length <= 60));

        var rules = new List<ChartRule>();
        if (judged) rules.Add(new(RuleRole.Target, 0, "target"));
        if (path.Cap is { } cap && cap - 1 <= x.High) rules.Add(new(RuleRole.Cap, cap - 1, $"cap {cap.ToString(CultureInfo.InvariantCulture)}"));
        if (now >= 0) rules.Add(cone is null ? new(RuleRole.Now, now, "measured") : new(RuleRole.Now, now, "measured", "expected"));

        return new LineChartSpec { X = x, Y = y, Series = series, Rules = rules, Notes = cone is null ? [] : [Note(cone, x)] };
    }

    /// <summary>True when the plot is against a target.</summary>
    public static bool Judged(FieldPath path) => path.Points.Count == 0 ? path.Target is not null : path.Points.Any(p => p.Need is not null);

    /// <summary>True when the norm runs away from its own ratio to the target, and is drawn dashed beside it.</summary>
    public static bool RunsAway(FieldPath path) => Explodes(path, Judged(path)) is not null;

    /// <summary>"met at iteration 9 (8–10)", or how many more by the rate alone.</summary>
    public static string Met(StepForecast forecast)
    {
        var at = Whole(forecast.AtIteration + forecast.Remaining);
        if (forecast.Basis != "paths") return $"{Whole(forecast.Remaining)} more, by its rate";
        return forecast is { Low: { } low, High: { } high } && Whole(high) != Whole(low)
            ? $"met at iteration {at} ({Whole(forecast.AtIteration + low)}\u2060–\u2060{Whole(forecast.AtIteration + high)})"
            : $"met at iteration {at}";
    }

    /// <summary>One point in words, exact: what hovering and walking say.</summary>
    public static string Reading(FieldPath path, PathPoint point)
    {
        var norm = $"‖r‖ = {Exact(point.Norm)}{(path.Unit is null ? "" : " " + path.Unit)}";
        if (!double.IsFinite(point.Norm)) return $"iteration {point.Iteration}: {norm}";
        return point.Need is { } need && double.IsFinite(need)
            ? $"iteration {point.Iteration}: {norm}, {(need <= 1e-9 ? "target met" : Numbers.Sig(Math.Pow(10, need)) + " × the target")}"
            : $"iteration {point.Iteration}: {norm}";
    }

    public static IReadOnlyList<string> Columns(FieldPath path) =>
        Judged(path)
            ? ["iteration", $"‖r‖{(path.Unit is null ? "" : $", {path.Unit}")}", "÷ target", "10 % of earlier steps", "90 %"]
            : ["iteration", $"‖r‖{(path.Unit is null ? "" : $", {path.Unit}")}"];

    /// <summary>The numbers of the plot, one row an iteration.</summary>
    public static IReadOnlyList<IReadOnlyList<string>> Rows(FieldPath path)
    {
        var judged = Judged(path);
        var points = path.Points.ToDictionary(p => p.Iteration);
        var band = path.Band.ToDictionary(b => b.Iteration);
        var rows = new List<IReadOnlyList<string>>();
        foreach (var i in points.Keys.Union(judged ? band.Keys : []).Order())
        {
            var p = points.GetValueOrDefault(i);
            var b = band.GetValueOrDefault(i);
            string[] measured = [i.ToString(CultureInfo.InvariantCulture), p is null ? Numbers.Dash : Exact(p.Norm)];
            rows.Add(judged ? [.. measured, Factor(p?.Need), Factor(b?.Low), Factor(b?.High)] : measured);
        }
        return rows;
    }

    private static string Factor(double? decades) => decades is { } d ? Numbers.Sig(Math.Pow(10, d)) : Numbers.Dash;

    private static string Exact(double value) => double.IsFinite(value) ? SettingsForm.SettingKind.Plain(value) : Numbers.Sig(value);

    private static double? Height(PathPoint p, bool judged)
    {
        var y = judged ? p.Need : p.Norm > 0 ? Math.Log10(p.Norm) : null;
        return y is { } v && double.IsFinite(v) && double.IsFinite(p.Norm) ? Math.Max(v, -16) : null;
    }

    private static IEnumerable<double> Heights(IEnumerable<ChartPoint> points) => points.Where(p => p.Y is not null).Select(p => p.Y!.Value);

    private static double Last(FieldPath path, ChartPoint[] band, StepForecast? cone)
    {
        double last = path.Points.Count > 0 ? path.Points[^1].Iteration + 1 : 0;
        if (band.Length > 0) last = Math.Max(last, band[^1].X);
        if (cone is null) return last;
        var end = cone.AtIteration + Math.Max(cone.Remaining, cone.High ?? 0);
        return Math.Max(last, Math.Min(end, Math.Max(60, 2.0 * (path.Cap ?? 0))));
    }

    private static ChartPoint[] Cone(int at, double need, double low, double high) => low <= 0
        ? [new(at, 0, need), new(at + high, 0, 0)]
        : [new(at, need, need), new(at + low, 0, need * (1 - low / high)), new(at + high, 0, 0)];

    private static ChartNote Note(StepForecast f, ChartAxis x)
    {
        var middle = f.AtIteration + f.Remaining / 2;
        return middle < 0.55 * x.High
            ? new(SeriesRole.Median, middle, f.Need / 2, Met(f))
            : new(SeriesRole.Median, x.High, f.Need, Met(f), Left: true);
    }

    /// <summary>The norm against the first target, where the target grew along with it by more than a decade: an exploding run hides in the ratio.</summary>
    private static ChartPoint[]? Explodes(FieldPath path, bool judged)
    {
        if (!judged || path.Points.Count < 2 || path.Points[0] is not { Need: { } need, Norm: > 0 } first) return null;
        var second = path.Points.Select(p => new ChartPoint(p.Iteration, double.IsFinite(p.Norm) && p.Norm > 0 ? need + Math.Log10(p.Norm / first.Norm) : null, Text: Reading(path, p))).ToArray();
        var apart = path.Points.Zip(second).Max(z => z.First.Need is { } n && z.Second.Y is { } y && double.IsFinite(n) ? y - n : 0);
        return apart > 1 ? second : null;
    }

    private static string Whole(double value) => Math.Round(value).ToString("0", CultureInfo.InvariantCulture);
}
