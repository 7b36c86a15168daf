using CouplingWatch.Components.Feed;
using CouplingWatch.Records;
using CouplingWatch.Server.Alerting;
using CouplingWatch.Server.Publishing;
using CouplingWatch.Server.Runs;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Live;

/// <summary>What the pages read, straight from the run hosts.</summary>
internal sealed class WatchFeed(RunRegistry runs, ChangeSignals signals, LiveUpdates updates) : IWatchFeed
{
    /// <summary>Who stands behind what is done on a page while the server has no keys.</summary>
    public const string By = "operator";

    public DateTimeOffset? LastRecordAt => updates.LastRecordAt ?? runs.All.Max(h => h.LastReceived);

    public async Task<IReadOnlyList<RunSummary>> BoardAsync(CancellationToken cancel = default)
    {
        var summaries = await Task.WhenAll(runs.All.Select(h => h.SummaryAsync(cancel)));
        return [.. summaries.Order(BoardOrder.ByStake)];
    }

    public async Task<RunDetail?> RunAsync(string run, CancellationToken cancel = default) =>
        runs.TryFind(run, out var host) ? await host.DetailAsync(cancel) : null;

    public async Task<BasisView?> BasisAsync(string run, int? step = null, int? iteration = null, FilterRule? rule = null, double? threshold = null, CancellationToken cancel = default) =>
        runs.TryFind(run, out var host) ? await host.AskAsync(m => m.Basis(step, iteration, rule, threshold), null, cancel) : null;

    public async Task<IReadOnlyList<IterationView>> IterationsAsync(string run, int step, CancellationToken cancel = default) =>
        runs.TryFind(run, out var host) ? await host.AskAsync<IReadOnlyList<IterationView>>(m => [.. m.Iterations(step)], [], cancel) : [];

    public Task<IReadOnlyList<Alert>> AlertsAsync(CancellationToken cancel = default) => runs.AlertsAsync(cancel);

    public async Task<PublishOutcome> PublishAsync(string run, SettingsProposal proposal, int madeFrom, CancellationToken cancel = default)
    {
        if (!runs.TryFind(run, out var host)) return new PublishOutcome(null, $"There is no run {run}.");
        var published = await host.PublishAsync(proposal, madeFrom, By, cancel);
        return new PublishOutcome(published.Revision, published.Refusal?.Detail);
    }

    public async Task<bool> AcknowledgeAsync(string alertId, CancellationToken cancel = default) =>
        await runs.AcknowledgeAsync(alertId, By, cancel) is null;

    public async Task<string?> ShelveAsync(string alertId, int minutes, string reason, CancellationToken cancel = default) =>
        (await runs.ShelveAsync(alertId, By, minutes, reason, cancel))?.Detail;

    public async Task<string?> UnshelveAsync(string alertId, CancellationToken cancel = default) =>
        (await runs.UnshelveAsync(alertId, By, cancel))?.Detail;

    public IDisposable OnChange(string? run, Action changed) => signals.Subscribe(run, changed);
}
