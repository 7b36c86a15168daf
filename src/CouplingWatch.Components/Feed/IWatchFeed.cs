using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Feed;

/// <summary>What the pages read and subscribe to. The server implements it in process; tests and mock-ups by hand.</summary>
public interface IWatchFeed
{
    Task<IReadOnlyList<RunSummary>> BoardAsync(CancellationToken cancel = default);

    /// <summary>The run page; null when there is no such run.</summary>
    Task<RunDetail?> RunAsync(string run, CancellationToken cancel = default);

    /// <summary>The secant basis at an iteration (the latest when null), with another rule or threshold as a what-if.</summary>
    Task<BasisView?> BasisAsync(string run, int? step = null, int? iteration = null, FilterRule? rule = null, double? threshold = null, CancellationToken cancel = default);

    /// <summary>The iterations of one step; empty when they are no longer kept.</summary>
    Task<IReadOnlyList<IterationView>> IterationsAsync(string run, int step, CancellationToken cancel = default);

    Task<IReadOnlyList<Alert>> AlertsAsync(CancellationToken cancel = default);

    /// <summary>Publishes a revision made from <paramref name="madeFrom"/>.</summary>
    Task<PublishOutcome> PublishAsync(string run, SettingsProposal proposal, int madeFrom, CancellationToken cancel = default);

    Task<bool> AcknowledgeAsync(string alertId, CancellationToken cancel = default);

    /// <summary>Puts an alert aside for some minutes, with a reason; answers null when done, else a sentence for the page.</summary>
    Task<string?> ShelveAsync(string alertId, int minutes, string reason, CancellationToken cancel = default);

    /// <summary>Takes a shelved alert up again before its time; answers null when done, else a sentence for the page.</summary>
    Task<string?> UnshelveAsync(string alertId, CancellationToken cancel = default);

    /// <summary>Calls back (from any thread, as often as records come; the page throttles) after the board or one run changed. Dispose to stop.</summary>
    IDisposable OnChange(string? run, Action changed);

    /// <summary>When the newest record of any run arrived; null before the first.</summary>
    DateTimeOffset? LastRecordAt { get; }
}

/// <param name="Problem">A sentence for the page when it was not published; null when it was.</param>
public sealed record PublishOutcome(int? Revision, string? Problem);
