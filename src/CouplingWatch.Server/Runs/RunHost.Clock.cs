using CouplingWatch.Monitoring;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Runs;

internal sealed partial class RunHost
{
    /// <summary>Looks at the clock: a silence that began, a shelf that ran out. Cheap when there is nothing.</summary>
    public Task LookAtClockAsync(CancellationToken cancel = default) => QueueAsync(async () =>
    {
        if (judge is null) return false;
        var now = around.Now();
        if (!Closed && signs.BeginningOfSilence(judge.Ask(m => m.SilenceLimitSeconds, null), now) is { } silent) await CommitAsync(silent, cancel);
        foreach (var alert in judge.Ask<IReadOnlyList<Alert>>(m => [.. m.Alerts.Where(a => a.State == AlertState.Shelved && a.ShelvedUntil <= now)], []))
            await CommitAsync(new UnshelvedEvent(alert.Id, Clock) { At = now }, cancel);
        return true;
    }, cancel);

    /// <summary>Who stands in an event that nobody but the clock caused.</summary>
    public const string Clock = "clock";

    /// <summary>A revision made with a way back goes back by itself when a step under it does not converge.</summary>
    private async ValueTask FollowUpAsync()
    {
        if (stepsToReview.Count == 0) return;
        var steps = stepsToReview.ToArray();
        stepsToReview.Clear();
        var revisions = judge!.Ask<IReadOnlyList<SettingsRevision>>(m => [.. m.Revisions], []);
        if (Publishing.FallBack.After(steps, revisions, fallBacks, Revision, around.Now()) is { } back)
            Tell(null, await JournalAndJudgeAsync(back));
    }
}
