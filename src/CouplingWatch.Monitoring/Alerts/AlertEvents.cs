using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Alerts;

/// <summary>What people do to alerts (states after IEC 62682: unacknowledged, acknowledged, returned, shelved, closed).</summary>
internal static class AlertEvents
{
    /// <summary>Applies the event.</summary>
    /// <returns>The id of the alert changed; null when there is none or nothing changed.</returns>
    public static string? Apply(AlertBook book, ServerEvent happened)
    {
        var (id, change) = happened switch
        {
            AcknowledgedEvent e => (e.AlertId, (Func<Alert, Alert>)(a => Acknowledge(a, e))),
            ShelvedEvent e => (e.AlertId, a => a.State == AlertState.Closed ? a : a with { State = AlertState.Shelved, ShelvedUntil = e.Until, ShelvedReason = e.Reason }),
            UnshelvedEvent e => (e.AlertId, Unshelve),
            _ => ("", a => a),
        };
        return id.Length > 0 && book.Change(id, change) ? id : null;
    }

    /// <summary>Ends the shelvings whose time is up.</summary>
    public static void EndShelving(AlertBook book, DateTimeOffset now, List<Change> changes)
    {
        if (book.ShelvedCount == 0) return;
        for (var i = 0; i < book.Entries.Count; i++)
        {
            var alert = book.Entries[i].Alert;
            if (alert.State != AlertState.Shelved || alert.ShelvedUntil is not { } until || until > now) continue;
            if (book.Change(alert.Id, Unshelve)) changes.Add(new Change(ChangeKind.Alert, alert.Id));
        }
    }

    private static Alert Acknowledge(Alert alert, AcknowledgedEvent e) => alert.State switch
    {
        AlertState.Unacknowledged => alert with { State = AlertState.Acknowledged, AcknowledgedBy = e.By, AcknowledgedAt = e.At },
        AlertState.Returned => alert with { State = AlertState.Closed, AcknowledgedBy = e.By, AcknowledgedAt = e.At },
        AlertState.Shelved => alert with { AcknowledgedBy = e.By, AcknowledgedAt = e.At },
        _ => alert,
    };

    private static Alert Unshelve(Alert alert)
    {
        if (alert.State != AlertState.Shelved) return alert;
        var acknowledged = alert.AcknowledgedBy is not null;
        var state = alert.ClosedSeq is null
            ? acknowledged ? AlertState.Acknowledged : AlertState.Unacknowledged
            : acknowledged ? AlertState.Closed : AlertState.Returned;
        return alert with { State = state, ShelvedUntil = null, ShelvedReason = null };
    }
}
