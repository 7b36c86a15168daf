using System.Runtime.CompilerServices;

namespace CouplingWatch.Monitoring.Journal;

/// <summary>A journal that lives as long as its object: for tests and for what is not to be kept. Safe for concurrent use.</summary>
public sealed class MemoryJournal : IJournal
{
    private readonly Lock gate = new();
    private readonly Dictionary<string, List<JournalEntry>> runs = new(StringComparer.Ordinal);

    /// <summary>When set, every write fails with it; for tests of a journal in trouble.</summary>
    public Func<Exception?>? Trouble { get; set; }

    /// <exception cref="ArgumentException">An entry does not follow the one before it.</exception>
    public ValueTask AppendAsync(string run, IReadOnlyList<JournalEntry> entries, CancellationToken cancel = default)
    {
        if (Trouble?.Invoke() is { } trouble) return ValueTask.FromException(trouble);
        if (entries.Count == 0) return ValueTask.CompletedTask;
        lock (gate)
        {
            if (!runs.TryGetValue(run, out var kept)) runs[run] = kept = [];
            for (var i = 0; i < entries.Count; i++)
            {
                if (entries[i].Order != kept.Count + i)
                    return ValueTask.FromException(new ArgumentException($"Entry {entries[i].Order} of run {run} came where {kept.Count + i} was expected.", nameof(entries)));
            }
            kept.AddRange(entries);
        }
        return ValueTask.CompletedTask;
    }

    public async IAsyncEnumerable<JournalEntry> ReadAsync(string run, long afterOrder = -1, [EnumeratorCancellation] CancellationToken cancel = default)
    {
        await Task.CompletedTask;
        JournalEntry[] kept;
        lock (gate) kept = runs.TryGetValue(run, out var list) ? [.. list.Where(e => e.Order > afterOrder)] : [];
        foreach (var entry in kept) yield return entry;
    }

    public ValueTask<JournalEntry?> FindAsync(string run, long seq, CancellationToken cancel = default)
    {
        lock (gate) return ValueTask.FromResult(runs.TryGetValue(run, out var kept) ? kept.Find(e => e.Kind == JournalEntryKind.Record && e.Seq == seq) : null);
    }

    public ValueTask<IReadOnlyList<JournaledRun>> RunsAsync(CancellationToken cancel = default)
    {
        lock (gate)
        {
            return ValueTask.FromResult<IReadOnlyList<JournaledRun>>([.. runs.Select(r => new JournaledRun(
                r.Key, r.Value.Select(OpenInstance.Of).FirstOrDefault(i => i is not null), r.Value.Where(e => e.Kind == JournalEntryKind.Record).Select(e => e.Seq + 1).DefaultIfEmpty(0).Max(), r.Value.Count))]);
        }
    }

    public ValueTask CheckWritableAsync(CancellationToken cancel = default) =>
        Trouble?.Invoke() is { } trouble ? ValueTask.FromException(trouble) : ValueTask.CompletedTask;

    public ValueTask DisposeAsync() => ValueTask.CompletedTask;
}
