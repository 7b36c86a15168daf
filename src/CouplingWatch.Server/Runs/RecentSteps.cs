using CouplingWatch.Records;

namespace CouplingWatch.Server.Runs;

/// <summary>Where the latest steps of a run begin in its journal, and what was in force there: enough to read only them again.</summary>
internal sealed class RecentSteps(int steps)
{
    private readonly Queue<long> starts = new();
    private readonly List<AppliedRecord> applied = [];
    private readonly List<ResizeRecord> resizes = [];

    /// <summary>Seq from which on the latest steps lie whole; null when that is the whole run.</summary>
    public long? From => starts.Count == steps ? starts.Peek() : null;

    public void Observe(StreamRecord record)
    {
        switch (record)
        {
            case IterationRecord { Iteration: 0 }:
                if (starts.Count == steps) starts.Dequeue();
                starts.Enqueue(record.Seq);
                break;
            case AppliedRecord { Settings: not null } settings:
                applied.Add(settings);
                Trim(applied);
                break;
            case ResizeRecord resize:
                resizes.Add(resize);
                Trim(resizes);
                break;
        }
    }

    /// <summary>The records before <paramref name="from"/> that still hold there, in order.</summary>
    public IReadOnlyList<StreamRecord> InForceAt(long from) =>
        [.. new StreamRecord?[] { resizes.FindLast(r => r.Seq < from), applied.FindLast(a => a.Seq < from) }.OfType<StreamRecord>().OrderBy(r => r.Seq)];

    /// <summary>Of those that begin before the latest steps only the last still counts.</summary>
    private void Trim<T>(List<T> records) where T : StreamRecord
    {
        if (From is { } from) records.RemoveRange(0, Math.Max(0, records.FindLastIndex(r => r.Seq < from)));
    }
}
