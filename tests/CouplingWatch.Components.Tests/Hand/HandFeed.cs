using CouplingWatch.Components.Feed;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Hand;

/// <summary>A feed held by hand: what it answers is set by the test, and it calls back when the test says so.</summary>
public sealed class HandFeed : IWatchFeed
{
    private readonly Lock gate = new();
    private readonly List<(string? Run, Action Changed)> listeners = [];

    public List<RunSummary> Runs { get; } = [];
    public Dictionary<string, RunDetail> Details { get; } = [];
    public Dictionary<(string Run, int Step), IReadOnlyList<IterationView>> Iterations { get; } = [];
    public List<Alert> Alerts { get; } = [];
    public Func<string, int?, int?, FilterRule?, double?, BasisView?> Basis { get; set; } = (_, _, _, _, _) => null;
    public Func<string, SettingsProposal, int, PublishOutcome> Publish { get; set; } = (_, _, made) => new(made + 1, null);
    public List<(string Run, SettingsProposal Proposal, int MadeFrom)> Published { get; } = [];
    public List<string> Acknowledged { get; } = [];
    public int BoardCalls { get; private set; }
    public int Listeners { get { lock (gate) return listeners.Count; } }
    public DateTimeOffset? LastRecordAt { get; set; }

    public Task<IReadOnlyList<RunSummary>> BoardAsync(CancellationToken cancel = default)
    {
        BoardCalls++;
        lock (gate) return Task.FromResult<IReadOnlyList<RunSummary>>([.. Runs]);
    }

    public Task<RunDetail?> RunAsync(string run, CancellationToken cancel = default) => Task.FromResult(Details.GetValueOrDefault(run));

    public Task<BasisView?> BasisAsync(string run, int? step = null, int? iteration = null, FilterRule? rule = null, double? threshold = null, CancellationToken cancel = default) =>
        Task.FromResult(Basis(run, step, iteration, rule, threshold) ?? Details.GetValueOrDefault(run)?.Basis);

    public Task<IReadOnlyList<IterationView>> IterationsAsync(string run, int step, CancellationToken cancel = default) =>
        Task.FromResult(Iterations.GetValueOrDefault((run, step)) ?? []);

    public Task<IReadOnlyList<Alert>> AlertsAsync(CancellationToken cancel = default)
    {
        lock (gate) return Task.FromResult<IReadOnlyList<Alert>>([.. Alerts]);
    }

    public Task<PublishOutcome> PublishAsync(string run, SettingsProposal proposal, int madeFrom, CancellationToken cancel = default)
    {
        Published.Add((run, proposal, madeFrom));
        return Task.FromResult(Publish(run, proposal, madeFrom));
    }

    public Task<bool> AcknowledgeAsync(string alertId, CancellationToken cancel = default)
    {
        Acknowledged.Add(alertId);
        return Task.FromResult(Change(alertId, a => a with { State = AlertState.Acknowledged, AcknowledgedBy = "day shift", AcknowledgedAt = LastRecordAt }));
    }

    public Task<string?> ShelveAsync(string alertId, int minutes, string reason, CancellationToken cancel = default) => Task.FromResult(
        Change(alertId, a => a with { State = AlertState.Shelved, ShelvedUntil = LastRecordAt?.AddMinutes(minutes), ShelvedReason = reason }) ? null : "There is no such alert.");

    public Task<string?> UnshelveAsync(string alertId, CancellationToken cancel = default) => Task.FromResult(
        Change(alertId, a => a with { State = AlertState.Unacknowledged, ShelvedUntil = null, ShelvedReason = null }) ? null : "There is no such alert.");

    private bool Change(string id, Func<Alert, Alert> change)
    {
        lock (gate)
        {
            var at = Alerts.FindIndex(a => a.Id == id);
            if (at < 0) return false;
            Alerts[at] = change(Alerts[at]);
            return true;
        }
    }

    public IDisposable OnChange(string? run, Action changed)
    {
        var entry = (run, changed);
        lock (gate) listeners.Add(entry);
        return new Subscription(this, entry);
    }

    /// <summary>Puts a summary in the place of the one with the same name (or at the end) without telling anybody.</summary>
    public void Set(RunSummary summary)
    {
        lock (gate)
        {
            var at = Runs.FindIndex(r => r.Run == summary.Run);
            if (at < 0) Runs.Add(summary);
            else Runs[at] = summary;
        }
    }

    /// <summary>Calls back everybody who follows this run, and everybody who follows the board.</summary>
    public void Tell(string run)
    {
        Action[] all;
        lock (gate) all = [.. listeners.Where(l => l.Run is null || l.Run == run).Select(l => l.Changed)];
        foreach (var changed in all) changed();
    }

    private sealed class Subscription(HandFeed feed, (string?, Action) entry) : IDisposable
    {
        public void Dispose()
        {
            lock (feed.gate) feed.listeners.Remove(entry);
        }
    }
}
