using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Storage.Sqlite;
using CouplingWatch.Testing.Journals;
using Microsoft.Data.Sqlite;

namespace CouplingWatch.Storage.Tests.Sqlite;

public sealed class SqliteJournalTests
{
    [Fact]
    public async Task Everything_acknowledged_is_there_again_after_the_process_was_lost()
    {
        using var folder = new TemporaryFolder();
        using var copies = new TemporaryFolder();
        await using var journal = new SqliteJournal(folder.Path);
        for (var order = 0; order < 40; order += 4)
        {
            await journal.AppendAsync("leaf", Entries.Range(order, order + 4, 3000), TestContext.Current.CancellationToken);
            // What a crash would leave: the files as they are on the medium now, nothing closed or folded back.
            var copy = Path.Combine(copies.Path, $"after-{order}");
            Directory.CreateDirectory(copy);
            foreach (var file in Directory.GetFiles(folder.Path).Where(f => !f.EndsWith("-shm", StringComparison.Ordinal) && !f.EndsWith(".lock", StringComparison.Ordinal)))
                File.Copy(file, Path.Combine(copy, Path.GetFileName(file)));
            await using var reopened = new SqliteJournal(copy);
            await JournalContract.Holds(reopened, "leaf", Entries.Range(0, order + 4, 3000));
            Assert.Equal(new JournaledRun("leaf", "6f1c", Entries.RecordsIn(order + 4), order + 4), Assert.Single(await reopened.RunsAsync(TestContext.Current.CancellationToken)));
        }
    }

    [Fact]
    public async Task A_log_cut_off_in_the_middle_of_a_commit_keeps_every_commit_before_it()
    {
        using var folder = new TemporaryFolder();
        using var copies = new TemporaryFolder();
        await using var journal = new SqliteJournal(folder.Path);
        var log = journal.File + "-wal";
        await journal.AppendAsync("leaf", Entries.Range(0, 4, 3000), TestContext.Current.CancellationToken);
        var acknowledged = new FileInfo(log).Length;
        await journal.AppendAsync("leaf", Entries.Range(4, 8, 3000), TestContext.Current.CancellationToken);
        var after = new FileInfo(log).Length;
        Assert.True(after > acknowledged, "the second commit is in the log");
        foreach (var cut in (long[])[acknowledged, acknowledged + 1, (acknowledged + after) / 2, after - 1])
        {
            var copy = Path.Combine(copies.Path, $"cut-{cut}");
            Directory.CreateDirectory(copy);
            File.Copy(journal.File, Path.Combine(copy, SqliteJournal.FileName));
            File.WriteAllBytes(Path.Combine(copy, SqliteJournal.FileName + "-wal"), (await ReadShared(log))[..(int)cut]);
            await using var reopened = new SqliteJournal(copy);
            await JournalContract.Holds(reopened, "leaf", Entries.Range(0, 4, 3000));
        }
    }

    [Fact]
    public async Task What_waits_when_the_journal_is_closed_is_still_written()
    {
        using var folder = new TemporaryFolder();
        var journal = new SqliteJournal(folder.Path);
        var appends = Enumerable.Range(0, 50).Select(i => journal.AppendAsync($"run-{i}", Entries.Range(0, 3)).AsTask()).ToList();
        await journal.DisposeAsync();
        await Task.WhenAll(appends);
        await using var reopened = new SqliteJournal(folder.Path);
        Assert.Equal(50, (await reopened.RunsAsync(TestContext.Current.CancellationToken)).Count);
        var refused = await Assert.ThrowsAsync<JournalUnavailableException>(async () => await journal.AppendAsync("run-0", Entries.Range(3, 4), TestContext.Current.CancellationToken));
        Assert.Contains("is closed", refused.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_folder_that_cannot_be_written_is_said_in_one_sentence()
    {
        using var folder = new TemporaryFolder();
        var file = Path.Combine(folder.Path, "file");
        File.WriteAllText(file, "");
        await using var journal = new SqliteJournal(Path.Combine(file, "inside"));
        await OneSentence(journal, "cannot be used");
        await using var blocked = new SqliteJournal(folder.Path);
        Directory.CreateDirectory(Path.Combine(folder.Path, SqliteJournal.FileName));
        await OneSentence(blocked, "cannot be opened");
    }

    [Fact]
    public async Task A_second_program_on_the_same_journal_is_refused_and_gets_it_when_the_first_is_gone()
    {
        using var folder = new TemporaryFolder();
        var first = new SqliteJournal(folder.Path);
        await first.AppendAsync("a", Entries.Range(0, 2), TestContext.Current.CancellationToken);
        await using var second = new SqliteJournal(folder.Path);
        await OneSentence(second, "is held by another program");
        await first.DisposeAsync();
        await second.CheckWritableAsync(TestContext.Current.CancellationToken);
        await JournalContract.Holds(second, "a", Entries.Range(0, 2));
    }

    [Fact]
    public async Task A_full_medium_is_told_apart_loses_nothing_acknowledged_and_writing_goes_on_when_there_is_room()
    {
        using var folder = new TemporaryFolder();
        await using var journal = new SqliteJournal(folder.Path);
        await journal.AppendAsync("a", Entries.Range(0, 4), TestContext.Current.CancellationToken);
        journal.LimitPages(30);
        var full = await Assert.ThrowsAsync<JournalUnavailableException>(async () => await journal.AppendAsync("a", Entries.Range(4, 8, 200_000), TestContext.Current.CancellationToken));
        Assert.True(full.NoRoom);
        Assert.Contains("no room", full.Message, StringComparison.Ordinal);
        await JournalContract.Holds(journal, "a", Entries.Range(0, 4));
        journal.LimitPages(null);
        await journal.AppendAsync("a", Entries.Range(4, 8, 200_000), TestContext.Current.CancellationToken);
        await JournalContract.Holds(journal, "a", [.. Entries.Range(0, 4), .. Entries.Range(4, 8, 200_000)]);
    }

    [Fact]
    public async Task A_damaged_file_and_one_of_a_newer_version_are_refused()
    {
        using var folder = new TemporaryFolder();
        File.WriteAllText(Path.Combine(folder.Path, SqliteJournal.FileName), new string('x', 5000));
        await using (var damaged = new SqliteJournal(folder.Path)) await OneSentence(damaged, "damaged");
        using var newer = new TemporaryFolder();
        using (var connection = new SqliteConnection($"Data Source={Path.Combine(newer.Path, SqliteJournal.FileName)};Pooling=False"))
        {
            connection.Open();
            using var command = connection.CreateCommand();
            command.CommandText = "PRAGMA user_version=99";
            command.ExecuteNonQuery();
        }
        await using var journal = new SqliteJournal(newer.Path);
        await OneSentence(journal, "newer version");
    }

    private static async Task OneSentence(SqliteJournal journal, string says)
    {
        var thrown = await Assert.ThrowsAsync<JournalUnavailableException>(async () => await journal.CheckWritableAsync());
        Assert.Contains(says, thrown.Message, StringComparison.Ordinal);
        Assert.DoesNotContain('\n', thrown.Message);
        Assert.False(thrown.NoRoom);
    }

    private static async Task<byte[]> ReadShared(string path)
    {
        await using var file = new FileStream(path, FileMode.Open, FileAccess.Read, FileShare.ReadWrite | FileShare.Delete);
        using var memory = new MemoryStream();
        await file.CopyToAsync(memory);
        return memory.ToArray();
    }
}
