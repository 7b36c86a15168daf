using CouplingWatch.Monitoring;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Runs;

internal sealed partial class RunHost
{
    private int clockWaits;

    /// <summary>Looks at the clock when its turn comes: a silence that began, a shelf that ran out. Does not wait; at most one look waits.</summary>
    public void LookAtClock()
    {
        if (Interlocked.Exchange(ref clockWaits, 1) == 1) return;
        _ = LookAsync();

        async Task LookAsync()
        {
            try { await QueueAsync(LookNowAsync, CancellationToken.None); }
            catch (Exception e) { log.LogWarning(e, "Run {Run}: what its clock says could not be written down", Run); }
            finally { Volatile.Write(ref clockWaits, 0); }
        }
    }

    private async ValueTask<bool> LookNowAsync()
    {
        if (judge is null) return false;
        var now = around.Now();
        if (!Closed && signs.BeginningOfSilence(judge.Ask(m => m.SilenceLimitSeconds, null), judge.Ask(m => m.BeatLimitSeconds, null), now) is { } silent)
            await CommitAsync(silent, CancellationToken.None);
        foreach (var alert in judge.Ask<IReadOnlyList<Alert>>(m => [.. m.Alerts.Where(a => a.State == AlertState.Shelved && a.ShelvedUntil <= now)], []))
            await CommitAsync(new UnshelvedEvent(alert.Id, Clock) { At = now }, CancellationToken.None);
        return true;
    }

    /// <summary>Who stands in an event that nobody but the clock caused.</summary>
    public const string Clock = "clock";

    /// <summary>What follows by itself on what was just judged: a way back of a revision, the next turn of a race.</summary>
    private async ValueTask FollowUpAsync()
    {
        if (stepsToReview.Count > 0)
        {
            var steps = stepsToReview.ToArray();
            stepsToReview.Clear();
            var revisions = judge!.Ask<IReadOnlyList<SettingsRevision>>(m => [.. m.Revisions], []);
            if (Publishing.FallBack.After(steps, revisions, fallBacks, Revision, around.Now()) is { } back) Tell(null, await JournalAndJudgeAsync(back));
        }
        // The wish stands until the monitor sees its revision published, so it survives a restart; one is granted a turn.
        if (!Closed && judge!.Ask(m => m.RaceWish is { } wish && m.Race is { } race ? new { wish, race.Id } : null, null) is { } next)
            Tell(null, await JournalAndJudgeAsync(new PublishedEvent(Revision + 1, next.wish.Settings, next.wish.Commands, next.Id, next.wish.Reason) { At = around.Now(), Race = next.Id, Arm = next.wish.Arm }));
    }
}
