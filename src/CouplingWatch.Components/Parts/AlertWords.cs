using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Parts;

/// <summary>What an alert says about itself in words. States after IEC 62682. Pure.</summary>
public static class AlertWords
{
    public static string Severity(Severity severity) => severity switch
    {
        Wire.Severity.Critical => "critical",
        Wire.Severity.Warning => "warning",
        _ => "note",
    };

    /// <summary><c>unacknowledged</c>, <c>acknowledged by night shift, 13:20</c>, <c>returned, unacknowledged</c>, <c>shelved until …: reason</c>, <c>closed</c>.</summary>
    public static string State(Alert alert, DateTimeOffset now, TimeZoneInfo? zone = null)
    {
        ArgumentNullException.ThrowIfNull(alert);
        return alert.State switch
        {
            AlertState.Acknowledged => "acknowledged" + By(alert, now, zone),
            AlertState.Returned => "returned, unacknowledged",
            AlertState.Shelved => alert.ShelvedUntil is { } until
                ? $"shelved until {Times.Near(until, now, zone)}{(alert.ShelvedReason is { Length: > 0 } why ? $": {why}" : "")}"
                : "shelved",
            AlertState.Closed => "closed",
            _ => "unacknowledged",
        };
    }

    /// <summary><c>Since 14:14, step 0, iteration 6 (seq 7). 18 min.</c></summary>
    public static string Since(Alert alert, DateTimeOffset now, TimeZoneInfo? zone = null)
    {
        ArgumentNullException.ThrowIfNull(alert);
        var at = alert.RaisedAt is { } raised ? Times.Near(raised, now, zone) + ", " : "";
        var place = $"step {Numbers.Count(alert.Step)}" + (alert.Iteration >= 0 ? $", iteration {Numbers.Count(alert.Iteration)}" : "");
        var open = alert.State is not (AlertState.Returned or AlertState.Closed);
        var again = alert.LastStep > alert.Step ? $"; again in step {Numbers.Count(alert.LastStep)}" : "";
        var length = open && alert.RaisedAt is { } since && now - since >= TimeSpan.FromMinutes(1) ? $" {Times.Span(now - since)}." : "";
        return $"{(open ? "Since" : "From")} {at}{place} (seq {Numbers.Count(alert.Seq)}){again}.{length}";
    }

    private static string By(Alert alert, DateTimeOffset now, TimeZoneInfo? zone) =>
        (alert.AcknowledgedBy is { Length: > 0 } by ? $" by {by}" : "") + (alert.AcknowledgedAt is { } at ? $", {Times.Near(at, now, zone)}" : "");
}
