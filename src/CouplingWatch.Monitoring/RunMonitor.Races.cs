using CouplingWatch.Monitoring.Checks;
using CouplingWatch.Monitoring.Race;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring;

/// <summary>Races on the running problem: their revisions start no hold-off, and steps under a challenger enter no baseline, path or count.</summary>
public sealed partial class RunMonitor
{
    private readonly RaceBook races;

    /// <summary>The race that goes on, or the latest one; null when there was none.</summary>
    public RaceView? Race => races.Current?.View();

    /// <summary>All races of the run, oldest first.</summary>
    public IReadOnlyList<RaceView> Races => races.All;

    /// <summary>The revision a race wants published now; null when there is none. It stays until a <see cref="PublishedEvent"/> of that race and arm is observed, also over a replay.</summary>
    public RaceWish? RaceWish => state.Close is null ? races.Current?.Wish : null;

    /// <summary>What would start a race, or why none can start. Changes nothing: the event has to be journaled and observed.</summary>
    /// <param name="proposal">As asked for.</param>
    /// <param name="by">Who asks.</param>
    /// <param name="seed">Taken when the proposal gives none.</param>
    /// <param name="first">Challengers that come after people's own and before the rule's: a rehearsal's best, a sister run's.</param>
    public RacePreparation PrepareRace(RaceProposal proposal, string by, long seed, DateTimeOffset at, IReadOnlyList<RaceChallenger>? first = null)
    {
        ArgumentNullException.ThrowIfNull(proposal);
        ArgumentNullException.ThrowIfNull(by);
        if (state.Open is not { } open) return RacePreparation.Refusal("no-open", "the run has not opened yet");
        if (state.Close is not null) return RacePreparation.Refusal("run-closed", "the run is closed");
        if (races.GoesOn) return RacePreparation.Refusal("race-running", $"{races.Current!.Id} goes on");
        if (state.Steady) return RacePreparation.Refusal("steady-run", "a steady run has no steps to take turns in");
        if (settings.All.LastOrDefault(r => r.State is RevisionState.Published or RevisionState.PickedUp) is { } waiting)
            return RacePreparation.Refusal("revision-pending", $"revision {waiting.Revision} is published but not applied yet");
        var own = (proposal.Challengers ?? []).Select(c => new RaceChallenger(state.Settings.With(c), "person")).ToList();
        var byRule = own.Count == 0 || proposal.FillUp;
        var choice = ChallengerList.Propose(state.Settings, open.Adjustable, state.DeclaredNoise, [.. own, .. byRule ? first ?? [] : []], byRule);
        if (choice.Challengers.Count == 0)
            return new RacePreparation(null, choice.Refused, "no-challenger", "no challenger can take part" + (choice.Refused.Count > 0 ? $": {choice.Refused[0].Why}" : ""));
        var started = new RaceStartedEvent($"race-{races.Started + 1}", by, proposal.Reason, proposal.ScoreBy, proposal.Seed ?? seed, choice.Challengers) { At = at };
        return new RacePreparation(started, choice.Refused, null, null);
    }

    private void OnRaceStarted(RaceStartedEvent e)
    {
        if (races.GoesOn) return;
        races.Start(e, state);
        RaceChanged();
    }

    private void OnRaceStopped(RaceStoppedEvent e)
    {
        if (!races.GoesOn || races.Current!.Id != e.Race) return;
        races.Current.Stop(e.By, e.Reason);
        RaceChanged();
    }

    private void OnRacePublished(PublishedEvent e)
    {
        if (e.Race is null || races.Current is not { } race || race.Id != e.Race) return;
        race.Published(e.Revision, e.Arm ?? 0);
        RaceChanged();
    }

    private void OnRaceRefused(AppliedRecord record)
    {
        if (record.Refused is not { } why || !races.GoesOn || !races.Owns(record.Revision)) return;
        races.Current!.Refused(record.Revision, why);
        RaceChanged();
    }

    private void EndRace(string why)
    {
        if (!races.GoesOn) return;
        races.Current!.Stop(null, why);
        RaceChanged();
    }

    /// <summary>Hands the step to the race. When that decides it and the winner is in force already, its steps are compared only with its own from here on.</summary>
    private void RaceStepClosed(in ClosedStep closed)
    {
        var running = races.Current is { State: RaceState.Running };
        var wentOn = races.GoesOn;
        races.StepClosed(closed);
        if (!wentOn) return;
        RaceChanged();
        if (running && WinnerInForce(closed.Revision)) Restart("applied", RestartCause.Settings);
    }

    private bool WinnerInForce(int revision) => races.Current is { State: RaceState.Watching, Verdict.Winner: { } winner } race && race.ArmOf(revision) == winner;

    /// <summary>What is raised on trial goes to the race's log, except what a challenger cannot be to blame for or what must be heard.</summary>
    private bool GoesToRaceLog(Finding finding)
    {
        if (!races.OnTrial(state.Revision)) return false;
        if (finding.Check is CheckIds.Silent or CheckIds.Hang) return false;
        if (finding.Check == CheckIds.Divergence && (state.Step.HasNotFinite || state.LastClosed is { Outcome: StepOutcome.Failed } failed && failed.Ordinal == state.Step.Ordinal)) return false;
        races.Current!.Note(state.Step.Step, $"{finding.Check}: {finding.Text}", races.Current.ArmOf(state.Revision)!.Value);
        return true;
    }

    private void RaceChanged() => changes.Add(new Change(ChangeKind.Race, races.Current!.Id));
}
