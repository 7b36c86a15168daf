using CouplingWatch.Monitoring.State;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>All steps of the run in bounded memory: the newest one by one, older ones in groups of 8, 64, … that keep their extremes.</summary>
/// <remarks>Each level holds at most <see cref="Capacity"/> entries; when it is full its oldest <see cref="Fold"/> become one entry of the next level. A million steps take about 2,500 entries.</remarks>
internal sealed class StepPyramid : IRunListener
{
    public const int Fold = 8;
    public const int Capacity = 512;

    private readonly List<Queue<StripBar>> levels = [new()];
    private int redone;
    private int? revision;

    /// <summary>Steps taken in.</summary>
    public int Count { get; private set; }

    public void SettingsInForce(RunState run, int fromStep) => revision = run.Revision;

    public void StepClosed(RunState run, in ClosedStep step)
    {
        if (step.Outcome == Records.StepOutcome.Rejected)
        {
            redone++;
            return;
        }
        Add(0, new StripBar(step.Step, step.Step, step.Iterations, step.Iterations, Margin(step.LastNeed), step.Unconverged ? 1 : 0, redone, revision, step.Time, step.At));
        Count++;
        redone = 0;
        revision = null;
    }

    /// <summary>The steps from <paramref name="from"/> to <paramref name="to"/>, neighbours joined until at most <paramref name="points"/> bars are left.</summary>
    public IReadOnlyList<StripBar> Bars(int? from, int? to, int points)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(points, 1);
        List<StripBar> bars = [];
        for (var level = levels.Count - 1; level >= 0; level--)
            foreach (var bar in levels[level])
                if (!(bar.ToStep < from) && !(bar.FromStep > to)) bars.Add(bar);
        if (bars.Count <= points) return bars;
        var width = Math.Ceiling((bars[^1].ToStep - bars[0].FromStep + 1) / (double)points);
        List<StripBar> joined = [];
        for (var i = 0; i < bars.Count;)
        {
            var group = Math.Floor((bars[i].FromStep - bars[0].FromStep) / width);
            var end = i + 1;
            while (end < bars.Count && Math.Floor((bars[end].FromStep - bars[0].FromStep) / width) == group) end++;
            joined.Add(Join(bars, i, end));
            i = end;
        }
        return joined;
    }

    private void Add(int level, StripBar bar)
    {
        if (level == levels.Count) levels.Add(new());
        var queue = levels[level];
        if (queue.Count == Capacity)
        {
            List<StripBar> oldest = [];
            for (var i = 0; i < Fold; i++) oldest.Add(queue.Dequeue());
            Add(level + 1, Join(oldest, 0, Fold));
        }
        queue.Enqueue(bar);
    }

    /// <summary>One bar for several; the median is that of the joined medians, each weighted by its steps.</summary>
    private static StripBar Join(List<StripBar> bars, int from, int end)
    {
        if (end - from == 1) return bars[from];
        var ordered = bars.GetRange(from, end - from);
        var first = ordered[0];
        var last = ordered[^1];
        int worst = 0, unconverged = 0, again = 0, steps = 0;
        double? margin = null;
        int? changed = null;
        foreach (var bar in ordered)
        {
            worst = Math.Max(worst, bar.Worst);
            unconverged += bar.Unconverged;
            again += bar.Redone;
            steps += bar.ToStep - bar.FromStep + 1;
            if (bar.MarginDecades is { } m && !(m <= margin)) margin = m;
            changed = bar.Revision ?? changed;
        }
        ordered.Sort((a, b) => a.Median.CompareTo(b.Median));
        var (median, passed) = (ordered[0].Median, 0);
        foreach (var bar in ordered)
        {
            median = bar.Median;
            passed += bar.ToStep - bar.FromStep + 1;
            if (2 * passed >= steps) break;
        }
        return new StripBar(first.FromStep, last.ToStep, median, worst, margin, unconverged, again, changed, last.Time, last.At);
    }

    private static double? Margin(double? need) => need is { } y ? Math.Clamp(y, -20, 300) : null;
}
