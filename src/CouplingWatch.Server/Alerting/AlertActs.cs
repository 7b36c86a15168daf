using System.Globalization;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Publishing;
using CouplingWatch.Server.Runs;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Alerting;

/// <summary>What people do with alerts. Every act is journaled; each answers null when it was done.</summary>
internal static class AlertActs
{
    /// <summary>Longest shelf: a week.</summary>
    public const int ShelveMinutes = 7 * 24 * 60;

    /// <summary>The alerts of every run, newest first.</summary>
    public static async Task<IReadOnlyList<Alert>> AlertsAsync(this RunRegistry runs, CancellationToken cancel)
    {
        var lists = await Task.WhenAll(runs.All.Select(h => h.AlertsAsync(cancel)));
        return [.. lists.SelectMany(l => l).OrderByDescending(a => a.RaisedAt).ThenBy(a => a.Id, StringComparer.Ordinal)];
    }

    public static Task<IReadOnlyList<Alert>> AlertsAsync(this RunHost host, CancellationToken cancel) =>
        host.AskAsync<IReadOnlyList<Alert>>(m => [.. m.Alerts], [], cancel);

    public static Task<Refusal?> AcknowledgeAsync(this RunRegistry runs, string id, string by, CancellationToken cancel) =>
        ActAsync(runs, id, (alert, now) => new AcknowledgedEvent(alert.Id, by) { At = now }, cancel);

    public static async Task<Refusal?> ShelveAsync(this RunRegistry runs, string id, string by, int minutes, string? reason, CancellationToken cancel)
    {
        if (minutes is < 1 or > ShelveMinutes)
            return new(Problem.Malformed, string.Create(CultureInfo.InvariantCulture, $"An alert can be shelved for 1 to {ShelveMinutes} minutes, not for {minutes}."), "minutes", $"1 to {ShelveMinutes}");
        if (string.IsNullOrWhiteSpace(reason)) return new(Problem.Malformed, "Shelving an alert needs a reason.", "reason", "a sentence");
        return await ActAsync(runs, id, (alert, now) => new ShelvedEvent(alert.Id, by, now.AddMinutes(minutes), reason) { At = now }, cancel);
    }

    public static Task<Refusal?> UnshelveAsync(this RunRegistry runs, string id, string by, CancellationToken cancel) =>
        ActAsync(runs, id, (alert, now) => alert.State == AlertState.Shelved ? new UnshelvedEvent(alert.Id, by) { At = now } : null, cancel);

    /// <summary>Finds the alert's run, then decides on that run's own turn.</summary>
    /// <param name="act">The event; null when there is nothing to do.</param>
    private static async Task<Refusal?> ActAsync(RunRegistry runs, string id, Func<Alert, DateTimeOffset, ServerEvent?> act, CancellationToken cancel)
    {
        foreach (var host in runs.All.Where(h => id.StartsWith(h.Run, StringComparison.Ordinal)))
        {
            var (found, refusal) = await host.DecideAsync<(bool, Refusal?)>((run, monitor) =>
            {
                if (monitor.Alerts.FirstOrDefault(a => a.Id == id) is not { } alert) return (null, (false, null));
                if (alert.State == AlertState.Closed) return (null, (true, new Refusal(Problem.AlertClosed, $"Alert {id} is closed already.")));
                return (act(alert, run.Now), (true, null));
            }, cancel);
            if (found) return refusal;
        }
        return new(Problem.UnknownAlert, $"There is no alert “{id}”.");
    }
}
