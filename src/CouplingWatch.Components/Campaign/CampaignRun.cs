using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Campaign;

/// <summary>
/// A run as a row of its campaign: the settings in force and what a step cost under them. The first three steps after a start are left out,
/// and so are all steps before the newest revision. Pure.
/// </summary>
public sealed record CampaignRun
{
    /// <summary>Steps after a start that count for nothing: there is no history yet to lend columns.</summary>
    public const int LeftOut = 3;

    public required RunSummary Summary { get; init; }
    public required CouplingSettings Settings { get; init; }
    /// <summary>Steps that count.</summary>
    public int Steps { get; init; }
    /// <summary>Mean iterations a step over the steps that count, and the 10 % and 90 % quantile; null without one.</summary>
    public double? Mean { get; init; }
    public double? Low { get; init; }
    public double? High { get; init; }
    /// <summary>Steps among them that gave up.</summary>
    public int GaveUp { get; init; }
    /// <summary>The settings hold since this step; null: from the first.</summary>
    public int? SinceStep { get; init; }
    /// <summary>Node-hours for a second of the physics; null when nodes, seconds or time were not sent.</summary>
    public double? NodeHoursPerSecond { get; init; }

    public string Name => Summary.Run;

    public static CampaignRun Of(RunDetail detail)
    {
        ArgumentNullException.ThrowIfNull(detail);
        var strip = detail.Summary.Strip;
        var since = strip.LastOrDefault(b => b.Revision is > 0)?.FromStep;
        var first = Math.Max(LeftOut, since ?? 0);
        var bars = strip.Where(b => b.FromStep >= first && b.Median > 0).Select(b => (b.Median, Weight: (double)(b.ToStep - b.FromStep + 1), b.Unconverged)).ToList();
        var weight = bars.Sum(b => b.Weight);
        return new CampaignRun
        {
            Summary = detail.Summary,
            Settings = detail.Settings,
            Steps = (int)weight,
            SinceStep = since,
            Mean = weight > 0 ? bars.Sum(b => b.Median * b.Weight) / weight : null,
            Low = Quantile(bars.Select(b => (b.Median, b.Weight)), 0.1),
            High = Quantile(bars.Select(b => (b.Median, b.Weight)), 0.9),
            GaveUp = bars.Sum(b => b.Unconverged),
            NodeHoursPerSecond = detail is { Cost.NodeHoursSpent: { } spent, Time: > 0 and var time } ? spent / time : null,
        };
    }

    /// <summary>The value below which the given share of the steps lies.</summary>
    private static double? Quantile(IEnumerable<(double Value, double Weight)> values, double share)
    {
        var sorted = values.OrderBy(v => v.Value).ToList();
        var left = share * sorted.Sum(v => v.Weight);
        foreach (var (value, weight) in sorted)
        {
            left -= weight;
            if (left <= 1e-9) return value;
        }
        return sorted.Count == 0 ? null : sorted[^1].Value;
    }
}
