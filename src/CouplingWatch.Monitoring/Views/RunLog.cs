using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>What the run itself said besides iterations and steps; the latest <see cref="Kept"/> entries.</summary>
internal sealed class RunLog : IRunListener
{
    public const int Kept = 500;

    private readonly Queue<LogEntry> entries = new();
    private readonly Queue<(long Seq, DateTimeOffset At)> closings = new();

    public IReadOnlyCollection<LogEntry> Entries => entries;

    public void Record(RunState run, StreamRecord record)
    {
        var text = record switch
        {
            OpenRecord open => Opening(open),
            CheckpointRecord checkpoint => $"checkpoint after step {checkpoint.Step}" + (checkpoint.Seconds is { } s ? $", written in {Say.Seconds(s)}" : ""),
            RemarkRecord remark => remark.Text,
            SkippedRecord skipped => $"the sender left out {(skipped.Iterations is { } n ? Say.Count(n, "iteration", "iterations") : "records")}" + (skipped.Why is { } why ? $" ({why})" : "") + "; that step lends no columns",
            ResizeRecord resize => "the interface changed its size; earlier columns " + (resize.BasisMapped ? "were mapped" : "were cleared"),
            CloseRecord close => $"closed as {close.Outcome.ToString().ToLowerInvariant()}" + (close.Reason is { } reason ? $": {reason}" : ""),
            AppliedRecord { Refused: { } refused } applied => $"revision {applied.Revision} refused: {refused}",
            AppliedRecord applied => $"revision {applied.Revision} taken over from step {applied.FromStep}",
            UnknownRecord unknown => $"a record of the unknown kind “{unknown.KindSent}” was kept and ignored",
            _ => null,
        };
        if (text is null) return;
        var what = record switch
        {
            AppliedRecord { Refused: not null } => "refused",
            UnknownRecord => "note",
            _ => record.Kind,
        };
        entries.Enqueue(new LogEntry(record.Seq, run.At, what, text, StepOf(record)));
        if (entries.Count > Kept) entries.Dequeue();
    }

    public void StepClosed(RunState run, in ClosedStep step)
    {
        closings.Enqueue((step.Seq, run.At));
        if (closings.Count > Kept) closings.Dequeue();
    }

    /// <summary>The run's own entries, the alerts and the settings revisions on one time line, newest first.</summary>
    public IReadOnlyList<LogEntry> With(IReadOnlyList<Alert> alerts, IReadOnlyList<SettingsRevision> revisions, int most)
    {
        List<LogEntry> all = [.. entries];
        foreach (var alert in alerts)
        {
            all.Add(new LogEntry(alert.Seq, alert.RaisedAt, "alert", $"{alert.Check}: {alert.Text}", alert.Step));
            if (alert.ClosedSeq is { } closed) all.Add(new LogEntry(closed, TimeOf(closed), "closed", $"{alert.Check} closed; last seen in step {alert.LastStep}", alert.LastStep));
            if (alert.AcknowledgedBy is { } by) all.Add(new LogEntry(alert.Seq, alert.AcknowledgedAt, "alert", $"{alert.Check} acknowledged by {by}", alert.Step));
        }
        foreach (var revision in revisions)
        {
            if (revision.Revision == 0 || revision.At is null) continue;
            var changes = string.Join(", ", revision.Changes.Select(c => $"{c.Setting} {c.From} → {c.To}").Concat(revision.Commands));
            all.Add(new LogEntry(long.MaxValue, revision.At, "settings", $"revision {revision.Revision} published{(revision.By is { } by ? " by " + by : "")}: {changes}{(revision.Reason is { } r ? $" “{r}”" : "")}", revision.FromStep));
        }
        return [.. all.OrderByDescending(e => e.At ?? DateTimeOffset.MinValue).ThenByDescending(e => e.Seq).Take(most)];
    }

    /// <summary>When the step that this record closed ended; null for a step that is no longer kept.</summary>
    private DateTimeOffset? TimeOf(long seq)
    {
        foreach (var (closed, at) in closings)
            if (closed == seq) return at;
        return null;
    }

    private static string Opening(OpenRecord open)
    {
        var text = open.Instance is { Length: > 0 } instance ? $"instance {instance}" : "opened";
        text += open.Adjustable.IsEmpty ? "; declares nothing adjustable" : "; adjustable: " + string.Join(", ", open.Adjustable.Ranges.Keys.Concat(open.Adjustable.Choices.Keys).Concat(open.Adjustable.Commands));
        return open.Continues is { } before ? $"{text}; continues {before.Run} from step {before.Step}" : text;
    }

    private static int? StepOf(StreamRecord record) => record switch
    {
        CheckpointRecord checkpoint => checkpoint.Step,
        AppliedRecord applied => applied.FromStep,
        _ => null,
    };
}
