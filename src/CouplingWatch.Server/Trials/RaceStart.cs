using System.Security.Cryptography;
using CouplingWatch.Monitoring.Race;
using CouplingWatch.Records;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Publishing;
using CouplingWatch.Server.Runs;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Trials;

/// <summary>Starts and stops races. The race itself lives in the monitor of its run and is carried by journaled events and records.</summary>
internal sealed class RaceStart(RehearsalDesk desk, ILogger<RaceStart> log)
{
    /// <summary>A rehearsal that takes longer than this is left out of the challengers.</summary>
    private static readonly TimeSpan Patience = TimeSpan.FromSeconds(10);

    /// <summary>The id of the race begun, or why none was.</summary>
    public async Task<(string? Race, Refusal? Refusal)> StartAsync(RunHost host, RaceProposal proposal, string by, CancellationToken cancel)
    {
        // Asked without a rehearsal first, so that a run that cannot race at all says so at once.
        var trial = await host.AskAsync(m => m.PrepareRace(proposal, by, 0, host.Now), null, cancel);
        if (trial is null) return (null, new Refusal(Problem.NoRace, $"The judgement of run {host.Run} stopped; no race can be held on it."));
        if (trial.Event is null) return (null, Refuse(host, trial));
        var first = proposal.Challengers is { Count: > 0 } && !proposal.FillUp ? null : await RehearsedAsync(host, cancel);
        var seed = BitConverter.ToInt64(RandomNumberGenerator.GetBytes(8)) & ((1L << 53) - 1);
        return await host.DecideAsync<(string?, Refusal?)>((run, monitor) =>
        {
            var prepared = monitor.PrepareRace(proposal, by, seed, run.Now, first);
            return prepared.Event is { } begun ? (begun, (begun.Race, null)) : (null, (null, Refuse(run, prepared)));
        }, cancel);
    }

    /// <summary>Null when it was stopped.</summary>
    public Task<Refusal?> StopAsync(RunHost host, string race, string by, string? reason, CancellationToken cancel) => host.DecideAsync<Refusal?>((run, monitor) =>
    {
        if (monitor.Races.All(r => r.Id != race)) return (null, new Refusal(Problem.UnknownRace, $"Run {run.Run} has no race “{race}”.", "id"));
        return monitor.Race is { State: not (RaceState.Finished or RaceState.Stopped) } current && current.Id == race
            ? (new RaceStoppedEvent(race, by, reason) { At = run.Now }, null)
            : (null, new Refusal(Problem.NoRace, $"{race} of run {run.Run} is over already.", "id"));
    }, cancel);

    private static Refusal Refuse(RunHost host, RacePreparation prepared) =>
        new(prepared.Code == "race-running" ? Problem.RaceRunning : Problem.NoRace, $"No race on run {host.Run}: {prepared.Why}.", prepared.Code);

    private async Task<IReadOnlyList<RaceChallenger>?> RehearsedAsync(RunHost host, CancellationToken cancel)
    {
        using var limit = CancellationTokenSource.CreateLinkedTokenSource(cancel);
        limit.CancelAfter(Patience);
        try
        {
            var view = await desk.RehearseAsync(host, null, null, limit.Token);
            if (view is not { Calibration.Trusted: true, Proposal: { } best }) return null;
            var inUse = await host.AskAsync(m => m.Revisions.LastOrDefault(r => r.State == RevisionState.Applied)?.Settings, null, cancel) ?? host.Open?.Settings ?? new CouplingSettings();
            return [new RaceChallenger(inUse.With(best.Settings), "rehearsal")];
        }
        catch (OperationCanceledException) when (!cancel.IsCancellationRequested) { return null; }
        catch (Exception e) when (e is not OperationCanceledException)
        {
            log.LogError(e, "The rehearsal before a race on run {Run} failed; the race begins without it", host.Run);
            return null;
        }
    }
}
