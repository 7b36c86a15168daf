using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Records;
using CouplingWatch.Server.Problems;

namespace CouplingWatch.Server.Runs;

/// <summary>Which record of a run may come next: the rules of seq, instance and close, without judging anything.</summary>
internal sealed class RunSequence(string run, IJournal journal)
{
    private readonly DigestWindow digests = new();

    /// <summary>Seq expected next; 0 before <c>open</c>.</summary>
    public long Next { get; private set; }

    /// <summary>The sender's instance; null when it sent none.</summary>
    public string? Instance { get; private set; }

    public bool Closed { get; private set; }

    /// <summary>Takes over a record that is in the journal.</summary>
    public void Committed(StreamRecord record, ReadOnlySpan<byte> digest, string? instance = null)
    {
        Next = record.Seq + 1;
        if (record is OpenRecord open) Instance = open.Instance ?? instance;
        if (record is CloseRecord) Closed = true;
        if (digest.Length == 32) digests.Add(record.Seq, digest);
    }

    /// <summary>
    /// Splits a batch: what is new, in order; resent records that equal what was kept are passed over; the first that fits nowhere is the fault.
    /// </summary>
    /// <param name="instance">The <c>instance</c> of the address; null when none was given.</param>
    public async ValueTask<(List<IncomingRecord> New, IntakeFault? Fault)> SortAsync(IReadOnlyList<IncomingRecord> batch, string? instance, CancellationToken cancel)
    {
        var fresh = new List<IncomingRecord>(batch.Count);
        if (Next > 0 && instance is not null && Instance is not null && instance != Instance) return (fresh, OtherInstance(instance));
        var expected = Next;
        var closed = Closed;
        foreach (var incoming in batch)
        {
            var record = incoming.Record;
            if (record.Seq < 0)
            {
                fresh.Add(incoming);
                continue;
            }
            if (record.Seq < expected)
            {
                if (await IsSameAsync(incoming, fresh, cancel)) continue;
                return (fresh, record is OpenRecord other && other.Instance != Instance ? OtherInstance(other.Instance, incoming.Line) : Conflict(incoming, expected));
            }
            if (record.Seq > expected) return (fresh, Gap(incoming, expected));
            if (closed) return (fresh, new(Problem.RunClosed, $"Run {run} was closed before record {record.Seq}; a restart is a new run that names this one in “continues”.", incoming.Line, record.Seq));
            if (expected == 0 && record is not OpenRecord)
                return (fresh, new(Problem.Malformed, $"Line {incoming.Line}: the first record of run {run} must be of kind “open”, this one is “{record.Kind}”.", incoming.Line, record.Seq, "kind", "open"));
            if (expected > 0 && record is OpenRecord)
                return (fresh, new(Problem.Malformed, $"Line {incoming.Line}: “open” stands only at seq 0, this one has {record.Seq}.", incoming.Line, record.Seq, "kind", "any kind but open"));
            if (record is OpenRecord { Instance: { } sent } && instance is not null && sent != instance)
                return (fresh, new(Problem.Malformed, $"Line {incoming.Line}: “open” says instance “{sent}”, the address says “{instance}”.", incoming.Line, record.Seq, "instance", instance));
            fresh.Add(incoming);
            expected++;
            closed |= record is CloseRecord;
        }
        return (fresh, null);
    }

    private async ValueTask<bool> IsSameAsync(IncomingRecord incoming, List<IncomingRecord> fresh, CancellationToken cancel)
    {
        var seq = incoming.Record.Seq;
        if (seq >= Next) return fresh.Exists(f => f.Record.Seq == seq && f.Digest.AsSpan().SequenceEqual(incoming.Digest));
        if (digests.Knows(seq, incoming.Digest, out var same)) return same;
        var kept = await journal.FindAsync(run, seq, cancel);
        return kept is not null && kept.Digest.Span.SequenceEqual(incoming.Digest);
    }

    private IntakeFault OtherInstance(string? instance, int? line = null) => new(Problem.RunExists,
        $"Run {run} belongs to another instance than “{instance}”; choose another run name, and name this run in “continues” when it is a restart.", line, Member: "instance");

    private static IntakeFault Conflict(IncomingRecord incoming, long expected) => new(Problem.SeqConflict,
        $"Line {incoming.Line}: another record was kept under seq {incoming.Record.Seq}; the next one is {expected}.", incoming.Line, incoming.Record.Seq, "seq", Text(expected));

    private static IntakeFault Gap(IncomingRecord incoming, long expected) => new(Problem.SeqGap,
        $"Line {incoming.Line}: seq {incoming.Record.Seq} came where {expected} was expected.", incoming.Line, incoming.Record.Seq, "seq", Text(expected));

    private static string Text(long value) => value.ToString(System.Globalization.CultureInfo.InvariantCulture);
}
