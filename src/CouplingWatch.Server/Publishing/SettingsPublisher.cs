using System.Globalization;
using CouplingWatch.Monitoring;
using CouplingWatch.Records;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Runs;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Publishing;

/// <param name="Revision">The revision published; null when it was refused.</param>
internal sealed record Published(int? Revision, Refusal? Refusal);

/// <summary>Publishes settings revisions: the newest one is what the run's code reads next.</summary>
internal static class SettingsPublisher
{
    /// <param name="madeFrom">Revision the proposal was made from; null takes the newest.</param>
    public static Task<Published> PublishAsync(this RunHost host, SettingsProposal proposal, int? madeFrom, string by, CancellationToken cancel = default) =>
        host.DecideAsync<Published>((run, monitor) =>
        {
            if (Decide(run, monitor, proposal, madeFrom) is { } refusal) return (null, new Published(null, refusal));
            var next = run.Revision + 1;
            var settings = Newest(run, monitor).With(proposal.Settings);
            return (new PublishedEvent(next, settings, proposal.Commands, by, proposal.Reason, proposal.FallbackTo) { At = run.Now }, new Published(next, null));
        }, cancel);

    /// <summary>Notes that the run's code read its newest revision, once a revision.</summary>
    public static Task<bool> PickUpAsync(this RunHost host, CancellationToken cancel = default) => host.DecideAsync<bool>((run, monitor) =>
        monitor.Revisions.LastOrDefault() is { State: RevisionState.Published, Revision: > 0 } newest
            ? (new PickedUpEvent(newest.Revision) { At = run.Now }, true)
            : (null, false), cancel);

    private static Refusal? Decide(RunHost run, RunMonitor monitor, SettingsProposal proposal, int? madeFrom)
    {
        if (run.Open is not { } open) return new(Problem.UnknownRun, $"Run {run.Run} has no records yet.");
        if (run.Closed) return new(Problem.RunClosed, $"Run {run.Run} was closed; nothing reads its settings any more.");
        if (monitor.Race is { State: RaceState.Waiting or RaceState.Running } race && !IsStop(proposal))
            return new(Problem.RaceRunning, $"{race.Id} is publishing settings of run {run.Run} in turn; stop it first.", "race", race.Id);
        if (madeFrom is { } from && from != run.Revision)
            return new(Problem.Stale, string.Create(CultureInfo.InvariantCulture, $"The proposal was made from revision {from}, but {run.Revision} is the newest."), "If-Match", $"\"{run.Revision}\"");
        if (proposal.FallbackTo is { } back && (back < 0 || back > run.Revision))
            return new(Problem.Malformed, string.Create(CultureInfo.InvariantCulture, $"There is no revision {back} to fall back to."), "fallbackTo", $"0 to {run.Revision}");
        return Proposals.Refuse(run.Run, proposal, Newest(run, monitor), open.Adjustable);
    }

    /// <summary>Asking a run to stop goes before everything.</summary>
    private static bool IsStop(SettingsProposal proposal) => proposal.Commands.Any(c => Commands.NameOf(c) == Commands.StopAfterStep) && !SettingValue.Of(proposal.Settings).Any();

    /// <summary>The settings that the newest revision stands for; one that the code refused leaves what was applied before.</summary>
    private static CouplingSettings Newest(RunHost run, RunMonitor monitor) =>
        monitor.Revisions.LastOrDefault(r => r.State is not (RevisionState.Refused or RevisionState.Withdrawn))?.Settings ?? run.Open!.Settings;
}
