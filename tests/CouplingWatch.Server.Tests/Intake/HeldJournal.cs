using CouplingWatch.Monitoring.Journal;

namespace CouplingWatch.Server.Tests.Intake;

/// <summary>A journal whose writes wait until they are let go.</summary>
internal sealed class HeldJournal : IJournal
{
    private readonly MemoryJournal inner = new();
    private TaskCompletionSource? held;

    public void Hold() => held = new TaskCompletionSource(TaskCreationOptions.RunContinuationsAsynchronously);

    public void Release() => held?.SetResult();

    public async ValueTask AppendAsync(string run, IReadOnlyList<JournalEntry> entries, CancellationToken cancel = default)
    {
        if (held is { } gate) await gate.Task;
        await inner.AppendAsync(run, entries, cancel);
    }

    public IAsyncEnumerable<JournalEntry> ReadAsync(string run, long afterOrder = -1, CancellationToken cancel = default) => inner.ReadAsync(run, afterOrder, cancel);

    public ValueTask<JournalEntry?> FindAsync(string run, long seq, CancellationToken cancel = default) => inner.FindAsync(run, seq, cancel);

    public ValueTask<IReadOnlyList<JournaledRun>> RunsAsync(CancellationToken cancel = default) => inner.RunsAsync(cancel);

    public ValueTask CheckWritableAsync(CancellationToken cancel = default) => inner.CheckWritableAsync(cancel);

    public ValueTask DisposeAsync() => inner.DisposeAsync();
}
