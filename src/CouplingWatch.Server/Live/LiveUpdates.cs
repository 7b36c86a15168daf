using System.Globalization;
using CouplingWatch.Monitoring;
using CouplingWatch.Records;
using CouplingWatch.Server.Runs;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Live;

/// <summary>Hears of every change, calls the pages of this process, and writes messages for outside clients where there are any.</summary>
internal sealed class LiveUpdates(ChangeSignals signals, HubWatchers watchers, HubOutbox outbox, TimeProvider time) : IRunAudience
{
    private long lastRecordTicks;

    /// <summary>When the newest record of any run arrived; null before the first since the start.</summary>
    public DateTimeOffset? LastRecordAt => Interlocked.Read(ref lastRecordTicks) is > 0 and var ticks ? new DateTimeOffset(ticks, TimeSpan.Zero) : null;

    public void Hear(RunHost host, RunJudge judge, StreamRecord? record, IReadOnlyList<Change> changes)
    {
        if (record is not null) Interlocked.Exchange(ref lastRecordTicks, time.GetUtcNow().UtcTicks);
        var run = watchers.Any(host.Run);
        var board = watchers.Any(HubWatchers.Board);
        if (run || board)
        {
            foreach (var change in changes)
            {
                var all = change.Kind is not (ChangeKind.Iteration or ChangeKind.Step);
                if (!run && !all) continue;
                if (Message(host, judge, record, change) is not { } made) continue;
                if (run) outbox.Put(host.Run, made.Method, made.Message);
                if (board && all) outbox.Put(HubWatchers.Board, made.Method, made.Message);
            }
        }
        signals.Raise(host.Run);
    }

    private (string Method, LiveMessage Message)? Message(RunHost host, RunJudge judge, StreamRecord? record, Change change)
    {
        var run = host.Run;
        var seq = host.NextSeq - 1;
        return change.Kind switch
        {
            ChangeKind.Iteration when record is IterationRecord iteration && judge.Ask(m => m.Iterations(iteration.Step).LastOrDefault(), null) is { } view =>
                ("iteration", new IterationMessage(run, seq, view)),
            ChangeKind.Step when CompleteStep(record) is { } step && judge.Ask(m => m.Steps(step, step, 1).LastOrDefault(), null) is { } bar =>
                ("step", new StepMessage(run, seq, bar)),
            ChangeKind.Verdict => ("verdict", new VerdictMessage(run, seq, judge.Ask(m => m.Verdict, judge.FaultVerdict))),
            ChangeKind.Alert when judge.Ask(m => m.Alerts.FirstOrDefault(a => a.Id == change.Subject), null) is { } alert =>
                ("alert", new AlertMessage(run, seq, alert)),
            ChangeKind.Advice => ("advice", new AdviceMessage(run, seq, judge.Ask<IReadOnlyList<Advice>>(m => [.. m.Advice], []))),
            ChangeKind.Settings when judge.Ask(m => Revision(m, change.Subject), null) is { } revision =>
                ("settings", new SettingsMessage(run, seq, revision)),
            ChangeKind.Race when judge.Ask(m => m.Detail().Race, null) is { } race =>
                ("race", new RaceMessage(run, seq, race)),
            _ => null,
        };
    }

    /// <summary>The step a record completes: its own, or the one before the first iteration of the next where a code sends no verdicts.</summary>
    private static int? CompleteStep(StreamRecord? record) => record switch
    {
        StepRecord step => step.Step,
        IterationRecord { Step: > 0 } iteration => iteration.Step - 1,
        _ => null,
    };

    private static SettingsRevision? Revision(RunMonitor monitor, string subject) =>
        int.TryParse(subject, NumberStyles.None, CultureInfo.InvariantCulture, out var number)
            ? monitor.Revisions.FirstOrDefault(r => r.Revision == number)
            : monitor.Revisions.LastOrDefault();
}
