using System.Text.Json;
using CouplingWatch.Monitoring;
using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Monitoring.Rehearsal;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;
using CouplingWatch.Server.Problems;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Runs;

internal sealed partial class RunHost
{
    private async ValueTask<IntakeAnswer> AcceptNowAsync(IReadOnlyList<IncomingRecord> batch, string? instance, CancellationToken cancel)
    {
        await LoadAsync(cancel);
        var (fresh, fault) = await sequence.SortAsync(batch, instance, cancel);
        if (fresh.Count > 0)
        {
            try { await CommitAsync(fresh, instance); }
            catch (JournalUnavailableException e)
            {
                fault = e.NoRoom
                    ? new(Problem.NoRoom, $"The journal has no room: {e.Message}", RetryAfterSeconds: 60)
                    : new(Problem.JournalDown, $"The journal cannot be written: {e.Message}", RetryAfterSeconds: 5);
            }
        }
        return new IntakeAnswer(sequence.Next, Revision, fault);
    }

    /// <summary>Journals records (and the end of a silence before them) as a whole, then judges them.</summary>
    private async ValueTask CommitAsync(List<IncomingRecord> fresh, string? instance)
    {
        var now = around.Now();
        var back = signs.EndOfSilence(now);
        var entries = new List<JournalEntry>(fresh.Count + 1);
        if (back is not null) entries.Add(EntryOf(back, nextOrder));
        foreach (var incoming in fresh.Where(f => f.Record.Seq >= 0))
            entries.Add(new JournalEntry(nextOrder + entries.Count, JournalEntryKind.Record, incoming.Record.Seq, now, incoming.Body, incoming.Digest));
        await AppendAsync(entries);

        if (back is not null) Tell(null, Judge(back));
        foreach (var incoming in fresh)
        {
            if (incoming.Record.Seq < 0)
            {
                if (incoming.Record is BeatRecord beat && signs.Beat(beat, HangLimit, now) is { } hang) Tell(null, await JournalAndJudgeAsync(hang));
                continue;
            }
            sequence.Committed(incoming.Record, incoming.Digest, instance);
            Tell(incoming.Record, Judge(incoming.Record, now));
        }
        await FollowUpAsync();
    }

    private async ValueTask CommitAsync(ServerEvent serverEvent, CancellationToken cancel)
    {
        cancel.ThrowIfCancellationRequested();
        Tell(null, await JournalAndJudgeAsync(serverEvent));
        await FollowUpAsync();
    }

    private async ValueTask<IReadOnlyList<Change>> JournalAndJudgeAsync(ServerEvent serverEvent)
    {
        await AppendAsync([EntryOf(serverEvent, nextOrder)]);
        return Judge(serverEvent);
    }

    /// <summary>What is begun is finished, whether or not the caller still listens; after a failure the journal is read again, as nobody knows what it kept.</summary>
    private async ValueTask AppendAsync(IReadOnlyList<JournalEntry> entries)
    {
        if (entries.Count == 0) return;
        try { await around.Journal.AppendAsync(Run, entries, CancellationToken.None); }
        catch
        {
            judge = null;
            loaded = false;
            throw;
        }
        nextOrder += entries.Count;
    }

    private IReadOnlyList<Change> Judge(StreamRecord record, DateTimeOffset received)
    {
        signs.Record(record, received);
        recent.Observe(record);
        if (record is OpenRecord or ResizeRecord or IterationRecord)
            Volatile.Write(ref shape, record is OpenRecord opened ? StreamShape.Of(opened.Fields) : shape?.After(record));
        if (record is OpenRecord first) Open = first;
        if (record is CloseRecord) Closed = true;
        if (record is StepRecord { Outcome: StepOutcome.Capped or StepOutcome.Failed } step) stepsToReview.Add(step.Step);
        var changes = judge!.Observe(record, received);
        Interlocked.Increment(ref version);
        return changes;
    }

    private IReadOnlyList<Change> Judge(ServerEvent serverEvent)
    {
        signs.Observe(serverEvent);
        if (serverEvent is PublishedEvent published)
        {
            Volatile.Write(ref revision, published.Revision);
            if (published.FallbackTo is { } fallBack) fallBacks[published.Revision] = fallBack;
            Interlocked.Exchange(ref revisionChanged, NewSignal()).TrySetResult();
        }
        var changes = judge!.Observe(serverEvent, sequence.Next - 1);
        Interlocked.Increment(ref version);
        return changes;
    }

    /// <summary>Derives everything from the journal; cheap when that was done before.</summary>
    private async ValueTask LoadAsync(CancellationToken cancel)
    {
        if (judge is not null) return;
        var fresh = new RunJudge(Run, around.MonitorOptions, log);
        sequence = new RunSequence(Run, around.Journal);
        signs = new SignsOfLife();
        recent = new RecentSteps(RehearsalTape.MostSteps);
        fallBacks.Clear();
        nextOrder = 0;
        judge = fresh;
        try
        {
            var reader = new RecordReader();
            await foreach (var entry in around.Journal.ReadAsync(Run, -1, cancel))
            {
                nextOrder = entry.Order + 1;
                if (entry.Kind == JournalEntryKind.Event)
                {
                    Judge(JsonSerializer.Deserialize<ServerEvent>(entry.Body.Span, WireJson.Options)!);
                    continue;
                }
                if (reader.Read(entry.Body.Span).Record is not { } record)
                    throw new InvalidDataException($"Run {Run}: entry {entry.Order} of the journal is no record.");
                sequence.Committed(record, entry.Digest.Span);
                Judge(record, entry.Received);
            }
            // What had to follow on these records followed when they came, and stands in the journal behind them.
            stepsToReview.Clear();
            signs.ListenFrom(around.Now());
            await FollowUpAsync();
            loaded = true;
        }
        catch
        {
            judge = null;
            loaded = false;
            throw;
        }
    }

    private static JournalEntry EntryOf(ServerEvent serverEvent, long order) =>
        new(order, JournalEntryKind.Event, -1, serverEvent.At, JsonSerializer.SerializeToUtf8Bytes(serverEvent, WireJson.Options), default);

    private double HangLimit(string solver) => judge!.Ask(m => m.HangLimitSeconds(solver), double.PositiveInfinity);

    private void Tell(StreamRecord? record, IReadOnlyList<Change> changes) => around.Audience.Hear(this, judge!, record, changes);
}
