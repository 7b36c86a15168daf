namespace CouplingWatch.Monitoring.Journal;

/// <summary>The journal: what came in and what was done, in order, durable. The truth everything else is derived from.</summary>
public interface IJournal : IAsyncDisposable
{
    /// <summary>Appends entries of one run, in order and as a whole; completes after they are durable (group commit with other callers).</summary>
    ValueTask AppendAsync(string run, IReadOnlyList<JournalEntry> entries, CancellationToken cancel = default);

    /// <summary>All entries of a run after <paramref name="afterOrder"/>, in order.</summary>
    IAsyncEnumerable<JournalEntry> ReadAsync(string run, long afterOrder = -1, CancellationToken cancel = default);

    /// <summary>The record with this seq, as received; null when there is none. For comparing a resent record.</summary>
    ValueTask<JournalEntry?> FindAsync(string run, long seq, CancellationToken cancel = default);

    /// <summary>Every run that has entries, with its instance and the seq expected next.</summary>
    ValueTask<IReadOnlyList<JournaledRun>> RunsAsync(CancellationToken cancel = default);

    /// <summary>Throws <see cref="JournalUnavailableException"/> when it cannot write.</summary>
    ValueTask CheckWritableAsync(CancellationToken cancel = default);
}

public enum JournalEntryKind { Record, Event }

/// <param name="Order">Place in the journal of the run, from 0, records and events together.</param>
/// <param name="Seq">Of the record; −1 for an event.</param>
/// <param name="Body">A record: its JSON bytes as kept (long vectors sketched). An event: the JSON of the <c>ServerEvent</c>.</param>
/// <param name="Digest">SHA-256 of the record as received (32 bytes); empty for an event.</param>
public sealed record JournalEntry(long Order, JournalEntryKind Kind, long Seq, DateTimeOffset Received, ReadOnlyMemory<byte> Body, ReadOnlyMemory<byte> Digest);

public sealed record JournaledRun(string Run, string? Instance, long NextSeq, long NextOrder);

public sealed class JournalUnavailableException(string message, Exception? inner = null) : Exception(message, inner)
{
    /// <summary>True when the medium is full, so that trying again soon is of no use.</summary>
    public bool NoRoom { get; init; }
}
