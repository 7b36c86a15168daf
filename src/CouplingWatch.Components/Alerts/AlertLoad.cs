using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Alerts;

/// <summary>The page's own load, so that a list that shouts too much shows it. Pure.</summary>
public static class AlertLoad
{
    public static string Of(IReadOnlyList<Alert> alerts, DateTimeOffset now)
    {
        ArgumentNullException.ThrowIfNull(alerts);
        var lately = alerts.Where(a => a.RaisedAt is { } at && at > now.AddDays(-1) && at <= now).ToList();
        var hours = lately.Count == 0 ? 24 : Math.Clamp((now - lately.Min(a => a.RaisedAt!.Value)).TotalHours, 1, 24);
        var text = $"This page’s own load: {Numbers.Count(lately.Count, "alert")} in the last {Times.Span(TimeSpan.FromHours(hours))}, {Numbers.Fixed(lately.Count / hours)} an hour.";
        var repeated = lately.GroupBy(a => (a.Run, a.Check)).Where(g => g.Count() >= 3).OrderByDescending(g => g.Count()).Take(3)
            .Select(g => $"{g.Key.Check} of {g.Key.Run} ({Numbers.Count(g.Count())} times)").ToList();
        text += repeated.Count == 0 ? " Repeated: none." : $" Repeated: {string.Join(", ", repeated)}.";
        var standing = alerts.Count(a => AlertGroups.Open(a) && a.RaisedAt < now.AddDays(-1));
        text += standing == 0 ? " Standing longer than a day: none." : $" Standing longer than a day: {Numbers.Count(standing)}.";
        var heads = AlertGroups.Of(alerts).Count;
        return heads == alerts.Count ? text : text + $" {Numbers.Count(alerts.Count, "condition")}, grouped by cause into {Numbers.Count(heads)}.";
    }
}
