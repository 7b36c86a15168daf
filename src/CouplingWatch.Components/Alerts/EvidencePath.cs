using System.Globalization;
using System.Text;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Alerts;

/// <summary>The steps around an alert. Pure.</summary>
public static class EvidenceSteps
{
    /// <summary>At most 24 bars: those that led up to the alert and those it holds for.</summary>
    public static IReadOnlyList<StripBar> Around(IReadOnlyList<StripBar> strip, Alert alert)
    {
        ArgumentNullException.ThrowIfNull(strip);
        ArgumentNullException.ThrowIfNull(alert);
        var until = strip.Count;
        while (until > 1 && strip[until - 1].FromStep > alert.LastStep + 4) until--;
        return [.. strip.Take(until).TakeLast(24)];
    }
}

/// <summary>The residual of one step in a box of 300 × 92: decades above the target where it is known, else decades of the norm. Pure.</summary>
public sealed record EvidencePath
{
    private const double Left = 34, Right = 292, Top = 10, Bottom = 70;

    public required int Step { get; init; }
    public required string Line { get; init; }
    public required string TopLabel { get; init; }
    public required string BottomLabel { get; init; }
    public required string Axis { get; init; }
    public required string Label { get; init; }
    public double? TargetY { get; init; }
    /// <summary>Where the alert was raised, when it was in this step.</summary>
    public (double X, double Y)? Raised { get; init; }
    public (double X, double Y) Last { get; init; }

    /// <summary>Null when fewer than two iterations are finite.</summary>
    public static EvidencePath? Of(IReadOnlyList<IterationView> iterations, Alert alert)
    {
        ArgumentNullException.ThrowIfNull(iterations);
        ArgumentNullException.ThrowIfNull(alert);
        // A growing residual takes its tolerance with it, so divergence is drawn as the norm itself.
        var needs = alert.Check != "divergence" && iterations.Any(i => i.Need is { } n && double.IsFinite(n));
        var points = iterations.Select(i => (i.Iteration, Y: needs ? i.Need ?? double.NaN : Math.Log10(Math.Max(i.Norm, 1e-300)))).Where(p => double.IsFinite(p.Y)).ToList();
        if (points.Count < 2) return null;
        double low = points.Min(p => p.Y), high = points.Max(p => p.Y);
        if (needs) (low, high) = (Math.Min(low, 0), Math.Max(high, 0));
        var (bottom, top) = (Math.Floor(low), Math.Max(Math.Ceiling(high), Math.Floor(low) + 1));
        int from = points[0].Iteration, to = points[^1].Iteration;
        double X(int i) => Left + (Right - Left) * (i - from) / Math.Max(1, to - from);
        double Y(double y) => Bottom - (Bottom - Top) * (y - bottom) / (top - bottom);
        var line = new StringBuilder();
        foreach (var (i, y) in points) line.Append(CultureInfo.InvariantCulture, $"{(line.Length == 0 ? "M" : "L")}{Numbers.Plain(X(i))} {Numbers.Plain(Y(y))}");
        var raised = iterations[0].Step == alert.Step ? points.Where(p => p.Iteration == alert.Iteration).Select(p => ((double, double)?)(X(p.Iteration), Y(p.Y))).FirstOrDefault() : null;
        var what = needs ? "residual ÷ target" : "residual";
        return new EvidencePath
        {
            Step = iterations[0].Step,
            Line = line.ToString(),
            TopLabel = Numbers.TenTo((int)top),
            BottomLabel = Numbers.TenTo((int)bottom),
            Axis = what,
            TargetY = needs ? Y(0) : null,
            Raised = raised,
            Last = (X(to), Y(points[^1].Y)),
            Label = $"{(needs ? "Residual against its target" : "Residual")} in step {Numbers.Count(iterations[0].Step)}: {Numbers.Power(Math.Pow(10, points[0].Y))} at iteration {from}, {Numbers.Power(Math.Pow(10, points[^1].Y))} at iteration {to}",
        };
    }
}
