using CouplingWatch.Ndjson;
using CouplingWatch.Records;

namespace CouplingWatch.Client.Buffering;

/// <summary>
/// The records on their way, bounded in bytes. Gives each its seq. When full, iterations and remarks are dropped and counted; the next record
/// that finds room is preceded by a <c>skipped</c> record. Verdicts, settings, checkpoints and the end get a quarter more room, the end
/// always finds some. Safe for concurrent use.
/// </summary>
internal sealed class Outbox(long bytesLimit)
{
    private readonly Lock gate = new();
    private readonly LinkedList<Pending> pending = new();
    private long bytes;
    private long nextSeq;
    private int droppedIterations;
    private bool dropping;
    private byte[]? opening;

    public long NextSeq
    {
        get { lock (gate) return nextSeq; }
    }

    public int Count
    {
        get { lock (gate) return pending.Count; }
    }

    public long Bytes
    {
        get { lock (gate) return bytes; }
    }

    /// <summary>Iterations dropped since the start because there was no room.</summary>
    public long Skipped { get; private set; }

    /// <summary>Queues the record; false when it was dropped.</summary>
    public bool Add(StreamRecord record)
    {
        lock (gate)
        {
            var passing = record is IterationRecord or RemarkRecord or UnknownRecord;
            var room = record is CloseRecord ? long.MaxValue : passing ? bytesLimit : bytesLimit + (bytesLimit / 4);
            // While dropping, iterations wait for half the buffer, so that what is skipped is one stretch and not every other record.
            if (bytes > (passing && dropping ? bytesLimit / 2 : room)) return Drop(record);
            if (dropping) Enqueue(new SkippedRecord { At = record.At, Iterations = droppedIterations, Why = "buffer" });
            (dropping, droppedIterations) = (false, 0);
            Enqueue(record);
            return true;
        }
    }

    /// <summary>The oldest records, up to both bounds, at least one when there are any.</summary>
    public List<Pending> Peek(int mostRecords, long mostBytes)
    {
        var batch = new List<Pending>();
        lock (gate)
        {
            long taken = 0;
            foreach (var entry in pending)
            {
                taken += entry.Line.Length;
                if (batch.Count > 0 && (batch.Count == mostRecords || taken > mostBytes)) break;
                batch.Add(entry);
            }
        }
        return batch;
    }

    /// <summary>Lets go of every record before <paramref name="next"/>.</summary>
    public void Acknowledge(long next)
    {
        lock (gate)
        {
            while (pending.First is { } first && first.Value.Seq < next)
            {
                bytes -= first.Value.Line.Length;
                pending.RemoveFirst();
            }
        }
    }

    /// <summary>Puts a remark in the place of a refused record, with its seq.</summary>
    public bool Replace(long seq, string why)
    {
        lock (gate)
        {
            for (var node = pending.First; node is not null; node = node.Next)
            {
                if (node.Value.Seq != seq) continue;
                var line = RecordWriter.Line(new RemarkRecord { Seq = seq, Text = why });
                bytes += line.Length - node.Value.Line.Length;
                node.Value = new Pending(seq, line);
                return true;
            }
            return false;
        }
    }

    /// <summary>The server lacks records that were let go of long ago: puts <c>skipped</c> records in their places, from <paramref name="next"/> on; <c>open</c> itself is never let go of.</summary>
    public void FillFrom(long next)
    {
        lock (gate)
        {
            var first = pending.First?.Value.Seq ?? nextSeq;
            for (var seq = first - 1; seq >= next; seq--)
            {
                var line = seq == 0 ? opening! : RecordWriter.Line(new SkippedRecord { Seq = seq, Why = "lost by the server" });
                bytes += line.Length;
                pending.AddFirst(new Pending(seq, line));
            }
        }
    }

    private bool Drop(StreamRecord record)
    {
        dropping = true;
        if (record is IterationRecord)
        {
            droppedIterations++;
            Skipped++;
        }
        return false;
    }

    private void Enqueue(StreamRecord record)
    {
        var seq = nextSeq++;
        var line = RecordWriter.Line(record with { Seq = seq });
        if (seq == 0) opening = line;
        bytes += line.Length;
        pending.AddLast(new Pending(seq, line));
    }
}
