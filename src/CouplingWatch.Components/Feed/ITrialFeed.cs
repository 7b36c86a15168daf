using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Feed;

/// <summary>What the trial bench asks for beyond <see cref="IWatchFeed"/>. A host without it shows the bench without rehearsal and race.</summary>
public interface ITrialFeed
{
    /// <summary>Replays the recorded steps under candidate settings; null when there is no such run.</summary>
    /// <param name="candidates">Each only what differs from the settings in use; null: searched.</param>
    /// <param name="progress">Told the share done, 0…1, now and then and from any thread.</param>
    Task<RehearsalView?> RehearseAsync(string run, IReadOnlyList<CouplingSettings>? candidates, IProgress<double>? progress = null, CancellationToken cancel = default);

    /// <summary>Starts a race on the running problem; its state is <see cref="RunDetail.Race"/>.</summary>
    Task<RaceOutcome> StartRaceAsync(string run, RaceProposal proposal, CancellationToken cancel = default);

    /// <summary>Stops a race; null when done, else a sentence why not.</summary>
    Task<string?> StopRaceAsync(string run, string race, string? reason = null, CancellationToken cancel = default);
}

/// <param name="Race">Its id; null when none was started.</param>
/// <param name="Problem">A sentence for the page when none was started.</param>
public sealed record RaceOutcome(string? Race, string? Problem);
