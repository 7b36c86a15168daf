using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Board;

/// <summary>What a lane says besides its verdict. Pure.</summary>
public static class LaneWords
{
    /// <summary>When the run ends, in the reader's zone; the feed's own sentence where no end is foretold. The first part is set in bold.</summary>
    public static (string Lead, string Tail) End(RunSummary run, DateTimeOffset now, TimeZoneInfo? zone = null)
    {
        ArgumentNullException.ThrowIfNull(run);
        if (run.Forecast is not { } f)
            return !LaneOrder.Closed(run) ? ("No end can be foretold yet", ".") : run.LastRecordAt is { } at ? ($"Ended {Times.Near(at, now, zone)}", $"{Early(run, at)}.") : ("Ended", ".");
        if (LaneOrder.Closed(run) || run.State == "quiet" || f.Ends is not { } ends) return Split(f.Text);
        var band = f is { EndsEarly: { } early, EndsLate: { } late } && late > early ? $" ({Band(early, late, ends, now, zone)})" : "";
        return ($"Ends {Times.Near(ends, now, zone)}", band + Allocation(run, f, ends, now, zone));
    }

    /// <summary>Node-hours at stake, as a sentence.</summary>
    public static string Stake(RunSummary run)
    {
        ArgumentNullException.ThrowIfNull(run);
        if (LaneOrder.Closed(run)) return "At stake: nothing.";
        if (run.NodeHoursAtStake is not { } stake)
            return run.Nodes is null ? "At stake: not known; the run does not say how many nodes it holds." : "At stake: not known yet.";
        if (run.NodeHoursLeft is { } left && (left > 0 || stake > 0)) return $"At stake: {Numbers.Hours(stake)} of {Numbers.NodeHours(left)}.";
        return stake == 0 ? "At stake: nothing." : $"At stake: {Numbers.NodeHours(stake)}.";
    }

    /// <summary>The step in progress: <c>step 16, iteration 19</c>; closed runs say when.</summary>
    public static string Place(RunSummary run, DateTimeOffset now, TimeZoneInfo? zone = null)
    {
        ArgumentNullException.ThrowIfNull(run);
        if (LaneOrder.Closed(run)) return run.LastRecordAt is { } at ? $"closed {Times.Near(at, now, zone)}" : "closed";
        if (run.Step < 0) return "no iteration yet";
        return $"step {Numbers.Count(run.Step)}" + (run.Iteration >= 0 ? $", iteration {Numbers.Count(run.Iteration)}" : "");
    }

    /// <summary>Splits a text where its first clause ends.</summary>
    public static (string Lead, string Tail) Split(string text)
    {
        ArgumentNullException.ThrowIfNull(text);
        for (var i = 1; i < text.Length - 1; i++)
        {
            // A colon inside a time or a comma inside a number ends no clause.
            if (text[i] == ' ' && text[i + 1] == '(') return (text[..i], text[i..]);
            if (text[i + 1] != ' ') continue;
            if (text[i] is ',' or ':' or ';') return (text[..i], text[i..]);
            if (text[i] == '.') return (text[..(i + 1)], text[(i + 1)..]);
        }
        return text.EndsWith('.') ? (text[..^1], ".") : (text, "");
    }

    private static string Allocation(RunSummary run, RunForecast f, DateTimeOffset ends, DateTimeOffset now, TimeZoneInfo? zone)
    {
        if (run.AllocationEndsAt is not { } allocation) return ".";
        var when = Times.Near(allocation, now, zone);
        if (ends > allocation)
            return (allocation < now ? $", after the allocation ended at {when}" : $", after the allocation has ended at {when}") + DoNotFit(run, f) + ".";
        return f.ChanceToMiss is >= 0.05 and { } chance
            ? $"; {Chance(chance)} that it misses the allocation, {when}."
            : $", {Times.Span(allocation - ends)} before the allocation.";
    }

    private static string Early(RunSummary run, DateTimeOffset at) =>
        run.AllocationEndsAt is { } allocation && allocation > at ? $", {Times.Span(allocation - at)} before its allocation" : "";

    private static string DoNotFit(RunSummary run, RunForecast f)
    {
        if (f.StepsThatDoNotFit is not { } steps || steps < 0.5) return "";
        var count = (long)Math.Round(steps);
        return run.StepsPlanned is { } all ? $": about {Numbers.Count(count)} of {Numbers.Count(all, "step")} will not fit" : $": about {Numbers.Count(count, "step")} will not fit";
    }

    private static string Chance(double chance) => chance >= 0.4 ? $"{Numbers.Percent(chance)} chance" : $"1 chance in {Math.Max(2, (int)Math.Round(1 / chance))}";

    // The day is said once where the band keeps within the day of the median.
    private static string Band(DateTimeOffset early, DateTimeOffset late, DateTimeOffset ends, DateTimeOffset now, TimeZoneInfo? zone)
    {
        var (a, b) = (Day(early, zone) == Day(ends, zone), Day(late, zone) == Day(ends, zone));
        var from = Times.Near(early, a ? early : now, zone);
        var to = Times.Near(late, b ? late : now, zone);
        return a && b ? $"{from}–{to}" : $"{from} – {to}";
    }

    private static DateTime Day(DateTimeOffset at, TimeZoneInfo? zone) => TimeZoneInfo.ConvertTime(at, zone ?? TimeZoneInfo.Utc).Date;
}
