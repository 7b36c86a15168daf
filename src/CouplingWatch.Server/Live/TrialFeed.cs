using CouplingWatch.Components.Feed;
using CouplingWatch.Records;
using CouplingWatch.Server.Runs;
using CouplingWatch.Server.Trials;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Live;

/// <summary>Rehearsal and race for the pages of this process.</summary>
internal sealed class TrialFeed(RunRegistry runs, RehearsalDesk desk, RaceStart races) : ITrialFeed
{
    public async Task<RehearsalView?> RehearseAsync(string run, IReadOnlyList<CouplingSettings>? candidates, IProgress<double>? progress = null, CancellationToken cancel = default) =>
        runs.TryFind(run, out var host) ? await desk.RehearseAsync(host, candidates, progress, cancel) : null;

    public async Task<RaceOutcome> StartRaceAsync(string run, RaceProposal proposal, CancellationToken cancel = default)
    {
        if (!runs.TryFind(run, out var host)) return new RaceOutcome(null, $"There is no run {run}.");
        var (race, refusal) = await races.StartAsync(host, proposal, WatchFeed.By, cancel);
        return new RaceOutcome(race, refusal?.Detail);
    }

    public async Task<string?> StopRaceAsync(string run, string race, string? reason = null, CancellationToken cancel = default) =>
        runs.TryFind(run, out var host) ? (await races.StopAsync(host, race, WatchFeed.By, reason, cancel))?.Detail : $"There is no run {run}.";
}
