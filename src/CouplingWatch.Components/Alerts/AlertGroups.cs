using CouplingWatch.Wire;

namespace CouplingWatch.Components.Alerts;

/// <summary>An alert and those it explains.</summary>
public sealed record AlertGroup(Alert Head, IReadOnlyList<Alert> AlsoSeen);

/// <summary>One list, grouped by cause: what a cause explains stands under it and does not shout on its own. Pure.</summary>
public static class AlertGroups
{
    /// <summary>Groups, what waits for an answer first: by state, then severity, then the newest.</summary>
    public static IReadOnlyList<AlertGroup> Of(IReadOnlyList<Alert> alerts)
    {
        ArgumentNullException.ThrowIfNull(alerts);
        var byId = alerts.ToDictionary(a => a.Id, StringComparer.Ordinal);
        var explained = alerts.ToLookup(a => Cause(a, byId)?.Id, StringComparer.Ordinal);
        return [.. alerts.Where(a => Cause(a, byId) is null)
            .OrderBy(a => Place(a.State)).ThenByDescending(a => a.Severity).ThenByDescending(a => a.RaisedAt).ThenBy(a => a.Id, StringComparer.Ordinal)
            .Select(a => new AlertGroup(a, [.. explained[a.Id].OrderBy(e => e.Seq)]))];
    }

    /// <summary>The alert at the root of the chain of causes, if it is listed and still stands with its symptom; null for a root. A ring counts as caused by its first id.</summary>
    private static Alert? Cause(Alert alert, Dictionary<string, Alert> byId)
    {
        var root = alert;
        var seen = new HashSet<string>(StringComparer.Ordinal) { alert.Id };
        while (root.Cause is { } id && byId.TryGetValue(id, out var cause))
        {
            if (!seen.Add(cause.Id))
            {
                root = byId[seen.Min(StringComparer.Ordinal)!];
                break;
            }
            root = cause;
        }
        return root.Id == alert.Id || (Open(alert) && !Open(root)) ? null : root;
    }

    /// <summary>The condition stands.</summary>
    public static bool Open(Alert alert)
    {
        ArgumentNullException.ThrowIfNull(alert);
        return alert.State is AlertState.Unacknowledged or AlertState.Acknowledged or AlertState.Shelved;
    }

    private static int Place(AlertState state) => state switch
    {
        AlertState.Unacknowledged => 0,
        AlertState.Acknowledged => 1,
        AlertState.Returned => 2,
        AlertState.Shelved => 3,
        _ => 4,
    };
}
