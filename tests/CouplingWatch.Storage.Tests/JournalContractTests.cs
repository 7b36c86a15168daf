using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Storage.Sqlite;
using CouplingWatch.Storage.Tests.Sqlite;
using CouplingWatch.Testing.Journals;

namespace CouplingWatch.Storage.Tests;

public sealed class JournalContractTests
{
    public static TheoryData<string> Promises() => [.. JournalContract.Promises.Keys];

    [Theory]
    [MemberData(nameof(Promises))]
    public async Task The_SQLite_journal_keeps(string promise)
    {
        using var folder = new TemporaryFolder();
        await using var journal = new SqliteJournal(folder.Path);
        await JournalContract.Promises[promise](journal);
    }

    [Theory]
    [MemberData(nameof(Promises))]
    public async Task The_memory_journal_keeps(string promise)
    {
        await using var journal = new MemoryJournal();
        await JournalContract.Promises[promise](journal);
    }
}
