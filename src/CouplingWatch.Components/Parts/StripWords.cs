using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Parts;

/// <summary>What the step strip says in words: the label of the drawing, the line under it, the texts of its axis. Pure.</summary>
public static class StripWords
{
    /// <summary>The whole strip in one sentence for the reader who does not see it.</summary>
    public static string Label(IReadOnlyList<StripBar> bars)
    {
        ArgumentNullException.ThrowIfNull(bars);
        if (bars.Count == 0) return "No step yet";
        var steps = bars[^1].ToStep - bars[0].FromStep + 1;
        var gave = bars.Sum(b => b.Unconverged);
        var redone = bars.Sum(b => b.Redone);
        var changes = bars.Count(b => b.Revision is not null);
        var worst = bars.MaxBy(b => b.Worst)!;
        var text = $"{Numbers.Count(steps, "step")}, {Numbers.Fixed(bars.Min(b => b.Median), 0)} to {Numbers.Count(worst.Worst)} iterations, most in step {Range(worst)}";
        if (bars.Any(b => b.ToStep > b.FromStep)) text += $"; drawn in {Numbers.Count(bars.Count, "group")}";
        if (gave > 0) text += $"; {Numbers.Count(gave)} gave up";
        if (redone > 0) text += $"; {Numbers.Count(redone)} redone";
        if (changes > 0) text += $"; settings changed {(changes == 1 ? "once" : Numbers.Count(changes) + " times")}";
        return text;
    }

    /// <summary>One bar: <c>step 13: 16 iterations, 0.62 of the target</c>.</summary>
    public static string One(StripBar bar)
    {
        ArgumentNullException.ThrowIfNull(bar);
        var group = bar.ToStep > bar.FromStep;
        var text = group
            ? $"steps {Range(bar)}: median {Numbers.Sig(bar.Median, 2)} iterations, worst {Numbers.Count(bar.Worst)}"
            : $"step {Numbers.Count(bar.FromStep)}: {Numbers.Count(bar.Worst, "iteration")}";
        text += bar.MarginDecades is { } m ? $", {Numbers.Sig(Math.Pow(10, m), 2)} of the target" : ", no tolerance known";
        if (bar.Unconverged > 0) text += group ? $"; {Numbers.Count(bar.Unconverged)} gave up" : "; gave up";
        if (bar.Redone > 0) text += group ? $"; {Numbers.Count(bar.Redone)} redone" : "; tried again";
        if (bar.Revision is { } r) text += $"; revision {r} from here";
        return text;
    }

    /// <summary>The one remark the axis has room for: a group's meaning first, then what was redone, what gave up, or why all inks are the same.</summary>
    public static string? Note(IReadOnlyList<StripBar> bars)
    {
        ArgumentNullException.ThrowIfNull(bars);
        if (bars.Count == 0) return null;
        var size = bars[0].ToStep - bars[0].FromStep + 1;
        if (size > 1) return $"a bar is {Numbers.Count(size)} steps: median, whisker to the worst";
        if (bars.FirstOrDefault(b => b.Redone > 0) is { } redone) return $"{Numbers.Count(bars.Sum(b => b.Redone), "step")} redone from step {Numbers.Count(redone.FromStep)}";
        var gave = bars.Where(b => b.Unconverged > 0).ToList();
        if (gave.Count == 1) return $"step {Numbers.Count(gave[0].FromStep)} gave up at {Numbers.Count(gave[0].Worst)} iterations";
        if (gave.Count > 1) return $"{Numbers.Count(gave.Count)} steps gave up";
        return bars.All(b => b.MarginDecades is null) ? "one ink: no tolerance is known" : null;
    }

    internal static string Range(StripBar bar) =>
        bar.ToStep > bar.FromStep ? $"{Numbers.Count(bar.FromStep)} to {Numbers.Count(bar.ToStep)}" : Numbers.Count(bar.FromStep);
}
