using CouplingWatch.Wire;

namespace CouplingWatch.Components.Parts;

/// <summary>Folds neighbouring bars of a strip into groups without losing an extreme. Pure; O(bars).</summary>
public static class StripFolding
{
    /// <summary>At most <paramref name="most"/> bars, all groups of the same number of bars but the last; the same list when it already fits.</summary>
    public static IReadOnlyList<StripBar> Fold(IReadOnlyList<StripBar> bars, int most)
    {
        ArgumentNullException.ThrowIfNull(bars);
        ArgumentOutOfRangeException.ThrowIfLessThan(most, 1);
        if (bars.Count <= most) return bars;
        var size = (bars.Count + most - 1) / most;
        var folded = new List<StripBar>((bars.Count + size - 1) / size);
        for (var from = 0; from < bars.Count; from += size)
            folded.Add(One(bars, from, Math.Min(bars.Count, from + size)));
        return folded;
    }

    private static StripBar One(IReadOnlyList<StripBar> bars, int from, int to)
    {
        double? margin = null;
        int worst = 0, unconverged = 0, redone = 0;
        int? revision = null;
        for (var i = from; i < to; i++)
        {
            var b = bars[i];
            if (b.MarginDecades is { } m && !(margin >= m)) margin = m;
            worst = Math.Max(worst, b.Worst);
            unconverged += b.Unconverged;
            redone += b.Redone;
            revision = b.Revision ?? revision;
        }
        return bars[from] with
        {
            ToStep = bars[to - 1].ToStep,
            Median = Median(bars, from, to),
            Worst = worst,
            MarginDecades = margin,
            Unconverged = unconverged,
            Redone = redone,
            Revision = revision,
        };
    }

    /// <summary>Median of the medians, each counted as often as it has steps; the mean of the two middle ones for an even count.</summary>
    private static double Median(IReadOnlyList<StripBar> bars, int from, int to)
    {
        var sorted = new (double Value, long Steps)[to - from];
        var all = 0L;
        for (var i = from; i < to; i++)
        {
            sorted[i - from] = (bars[i].Median, Math.Max(1, bars[i].ToStep - bars[i].FromStep + 1));
            all += sorted[i - from].Steps;
        }
        Array.Sort(sorted, (a, b) => a.Value.CompareTo(b.Value));
        return 0.5 * (At(sorted, (all - 1) / 2) + At(sorted, all / 2));
    }

    private static double At((double Value, long Steps)[] sorted, long rank)
    {
        foreach (var (value, steps) in sorted)
        {
            if (rank < steps) return value;
            rank -= steps;
        }
        return sorted[^1].Value;
    }
}
