using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Parts;

/// <summary>A forecast on the clock of the board: 0 to 48 hours on 0 to 480 units. Pure.</summary>
public sealed record ForecastDrawing
{
    public const double Hours = 48, Units = 480;

    /// <summary>No forecast: the bar is dotted.</summary>
    public bool Stands { get; private init; }
    /// <summary>The line runs from now to here.</summary>
    public double? To { get; private init; }
    public (double From, double To)? Band { get; private init; }
    /// <summary>The part of the band after the end of the allocation.</summary>
    public (double From, double To)? Late { get; private init; }
    public double? Median { get; private init; }
    /// <summary>The end lies beyond the clock.</summary>
    public bool Beyond { get; private init; }
    /// <summary>End of the allocation.</summary>
    public double? Post { get; private init; }
    public string Label { get; private init; } = "";

    public static ForecastDrawing Of(RunForecast? forecast, DateTimeOffset? allocationEndsAt, DateTimeOffset now, bool standsStill)
    {
        var post = allocationEndsAt is { } a && a >= now && Hour(a, now) <= Hours ? X(a, now) : (double?)null;
        if (standsStill || forecast?.Ends is not { } ends)
            return new ForecastDrawing { Stands = true, Post = post, Label = "No forecast" + Allocation(allocationEndsAt, now) };
        var (early, late) = (forecast.EndsEarly ?? ends, forecast.EndsLate ?? ends);
        var band = early < late ? (From: X(early, now), To: X(late, now)) : ((double From, double To)?)null;
        if (band is { } b && b.To - b.From < 1) band = b.From < Units ? (b.From, Math.Min(Units, b.From + 1)) : null;
        (double From, double To)? after = null;
        if (band is { } whole && allocationEndsAt is { } end && late > end) after = (Math.Max(whole.From, X(end, now)), whole.To);
        if (after is { } part && part.To <= part.From) after = null;
        return new ForecastDrawing
        {
            To = band?.From ?? X(ends, now),
            Band = band,
            Late = after,
            Median = Hour(ends, now) <= Hours ? X(ends, now) : null,
            Beyond = Hour(early, now) > Hours,
            Post = post,
            Label = $"End of the run in {Span(ends, now)}{(early < late ? $", {Span(early, now)} to {Span(late, now)}" : "")}{Allocation(allocationEndsAt, now)}",
        };
    }

    private static double Hour(DateTimeOffset at, DateTimeOffset now) => (at - now).TotalHours;

    private static double X(DateTimeOffset at, DateTimeOffset now) => Math.Clamp(Hour(at, now) * Units / Hours, 0, Units);

    private static string Span(DateTimeOffset at, DateTimeOffset now) => at <= now ? "no time" : Times.Span(at - now);

    private static string Allocation(DateTimeOffset? end, DateTimeOffset now) => end switch
    {
        null => "",
        { } e when e < now => $"; the allocation ended {Times.Span(now - e)} ago",
        { } e => $"; the allocation ends in {Times.Span(e - now)}",
    };
}
