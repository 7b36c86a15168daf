using CouplingWatch.Monitoring.Journal;

namespace CouplingWatch.Storage.Sqlite;

/// <summary>Entries waiting for the writer. No run: only see whether writing works.</summary>
internal sealed class AppendRequest(string? run, IReadOnlyList<JournalEntry> entries)
{
    private readonly TaskCompletionSource done = new(TaskCreationOptions.RunContinuationsAsynchronously);

    public string? Run { get; } = run;

    public IReadOnlyList<JournalEntry> Entries { get; } = entries;

    /// <summary>Completes after the entries are durable.</summary>
    public Task Done => done.Task;

    public void Succeed() => done.TrySetResult();

    public void Fail(Exception why) => done.TrySetException(why);
}
