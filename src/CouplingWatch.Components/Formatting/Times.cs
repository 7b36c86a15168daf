using System.Globalization;

namespace CouplingWatch.Components.Formatting;

/// <summary>How the pages write moments and spans. Moments are shown in the zone given (UTC unless a page knows better). Every member is pure.</summary>
public static class Times
{
    /// <summary>A moment as near as needed: the same day <c>14:30</c>, within six days <c>Thu 02:30</c>, else <c>1 Dec 14:30</c>, another year <c>1 Dec 2025</c>.</summary>
    public static string Near(DateTimeOffset moment, DateTimeOffset now, TimeZoneInfo? zone = null)
    {
        var (m, n) = (In(moment, zone), In(now, zone));
        if (m.Date == n.Date) return Format(m, "HH:mm");
        if (Math.Abs((m.Date - n.Date).TotalDays) <= 6) return Format(m, "ddd HH:mm");
        return Format(m, m.Year == n.Year ? "d MMM HH:mm" : "d MMM yyyy");
    }

    /// <summary>A moment with its day named: <c>Mon 30 Nov, 18:10</c>.</summary>
    public static string Day(DateTimeOffset moment, TimeZoneInfo? zone = null) => Format(In(moment, zone), "ddd d MMM, HH:mm");

    /// <summary>A moment in full: <c>Tue 1 Dec 2026, 14:32 UTC</c>.</summary>
    public static string Full(DateTimeOffset moment, TimeZoneInfo? zone = null) => $"{Format(In(moment, zone), "ddd d MMM yyyy, HH:mm")} {ZoneName(moment, zone)}";

    /// <summary>The clock with seconds: <c>14:29:10</c>.</summary>
    public static string Clock(DateTimeOffset moment, TimeZoneInfo? zone = null) => Format(In(moment, zone), "HH:mm:ss");

    /// <summary>A machine-readable moment for <c>datetime</c> attributes.</summary>
    public static string Iso(DateTimeOffset moment) => moment.ToUniversalTime().ToString("yyyy-MM-dd'T'HH:mm:ss'Z'", CultureInfo.InvariantCulture);

    /// <summary>A span in one unit: <c>2 s</c>, <c>47 min</c>, <c>3.3 h</c>, <c>2.1 d</c>. Negative spans are written as their length.</summary>
    public static string Span(TimeSpan span)
    {
        var s = Math.Abs(span.TotalSeconds);
        return s switch
        {
            < 0.95 => Numbers.Sig(s, 2) + " s",
            < 99.5 => Numbers.Fixed(s, 0) + " s",
            < 99.5 * 60 => Numbers.Fixed(s / 60, s < 9.95 * 60 ? 1 : 0) + " min",
            < 48 * 3600 => Numbers.Fixed(s / 3600, 1) + " h",
            _ => Numbers.Fixed(s / 86400, 1) + " d",
        };
    }

    /// <summary>How long ago, in whole seconds first: <c>just now</c>, <c>2 s ago</c>, <c>47 min ago</c>.</summary>
    public static string Ago(DateTimeOffset moment, DateTimeOffset now)
    {
        var span = now - moment;
        return span.TotalSeconds < 1 ? "just now" : Span(TimeSpan.FromSeconds(Math.Floor(span.TotalSeconds))) + " ago";
    }

    private static DateTimeOffset In(DateTimeOffset moment, TimeZoneInfo? zone) => TimeZoneInfo.ConvertTime(moment, zone ?? TimeZoneInfo.Utc);

    private static string Format(DateTimeOffset moment, string format) => moment.ToString(format, CultureInfo.InvariantCulture);

    private static string ZoneName(DateTimeOffset moment, TimeZoneInfo? zone)
    {
        if (zone is null || zone.Equals(TimeZoneInfo.Utc)) return "UTC";
        var offset = zone.GetUtcOffset(moment);
        return offset == TimeSpan.Zero ? "UTC" : $"UTC{(offset < TimeSpan.Zero ? "−" : "+")}{offset:hh\\:mm}";
    }
}
