using CouplingWatch.Monitoring.Journal;
using static CouplingWatch.Testing.ContractBrokenException;

namespace CouplingWatch.Testing.Journals;

/// <summary>What every <see cref="IJournal"/> promises, each against a fresh, empty journal.</summary>
public static class JournalContract
{
    public static IReadOnlyDictionary<string, Func<IJournal, Task>> Promises { get; } = new Dictionary<string, Func<IJournal, Task>>
    {
        ["What was appended is read back in order, byte for byte"] = ReadsBack,
        ["Reading after an order leaves out everything up to it"] = ReadsAfter,
        ["Runs are kept apart"] = KeepsApart,
        ["Entries that do not follow are refused as a whole and nothing else is lost"] = RefusesGaps,
        ["A record is found by its seq and an event never is"] = Finds,
        ["The runs are listed with their instance and what comes next"] = ListsRuns,
        ["An unknown run reads as empty"] = UnknownRun,
        ["Many callers at once each find their own entries"] = ManyCallers,
        ["Appending nothing does nothing"] = AppendsNothing,
        ["A journal that works says so"] = journal => journal.CheckWritableAsync().AsTask(),
    };

    private static async Task ReadsBack(IJournal journal)
    {
        await journal.AppendAsync("leaf80-1", Entries.Range(0, 5));
        await journal.AppendAsync("leaf80-1", Entries.Range(5, 1500));
        await Holds(journal, "leaf80-1", Entries.Range(0, 1500));
    }

    private static async Task ReadsAfter(IJournal journal)
    {
        await journal.AppendAsync("leaf", Entries.Range(0, 30));
        await Holds(journal, "leaf", Entries.Range(11, 30), 10);
        await Holds(journal, "leaf", [], 29);
        await Holds(journal, "leaf", [], 1000);
    }

    private static async Task KeepsApart(IJournal journal)
    {
        await journal.AppendAsync("a", Entries.Range(0, 3));
        await journal.AppendAsync("b", Entries.Range(0, 7));
        await journal.AppendAsync("a", Entries.Range(3, 6));
        await Holds(journal, "a", Entries.Range(0, 6));
        await Holds(journal, "b", Entries.Range(0, 7));
    }

    private static async Task RefusesGaps(IJournal journal)
    {
        await journal.AppendAsync("a", Entries.Range(0, 3));
        foreach (var wrong in (IReadOnlyList<JournalEntry>[])[Entries.Range(4, 6), Entries.Range(2, 5), [Entries.At(3), Entries.At(5)]])
        {
            var refused = false;
            try
            {
                await journal.AppendAsync("a", wrong);
            }
            catch (ArgumentException)
            {
                refused = true;
            }
            Unless(refused, $"entries from {wrong[0].Order} were taken after 3 entries");
        }
        await journal.AppendAsync("a", Entries.Range(3, 4));
        await Holds(journal, "a", Entries.Range(0, 4));
    }

    private static async Task Finds(IJournal journal)
    {
        await journal.AppendAsync("a", Entries.Range(0, 9));
        await journal.AppendAsync("b", Entries.Range(0, 2));
        var found = await journal.FindAsync("a", 3);
        Unless(found is not null && Entries.Same(found, Entries.At(4)), "record 3 is entry 4");
        Unless(await journal.FindAsync("a", 7) is null, "there is no record 7");
        Unless(await journal.FindAsync("b", 3) is null, "run b has no record 3");
        Unless(await journal.FindAsync("c", 0) is null, "there is no run c");
        Unless(await journal.FindAsync("a", -1) is null, "an event has no seq to find it by");
    }

    private static async Task ListsRuns(IJournal journal)
    {
        Equal(0, (await journal.RunsAsync()).Count, "runs of an empty journal");
        await journal.AppendAsync("a", Entries.Range(0, 1));
        await journal.AppendAsync("b", Entries.Range(0, 8));
        await journal.AppendAsync("a", Entries.Range(1, 4));
        var runs = (await journal.RunsAsync()).OrderBy(r => r.Run, StringComparer.Ordinal).ToList();
        Equal(2, runs.Count, "runs");
        Equal(new JournaledRun("a", "6f1c", 3, 4), runs[0], "run a");
        Equal(new JournaledRun("b", "6f1c", 6, 8), runs[1], "run b");
    }

    private static async Task UnknownRun(IJournal journal) => await Holds(journal, "nobody", []);

    private static async Task AppendsNothing(IJournal journal)
    {
        await journal.AppendAsync("a", []);
        Equal(0, (await journal.RunsAsync()).Count, "runs");
    }

    private static async Task ManyCallers(IJournal journal)
    {
        await Task.WhenAll(Enumerable.Range(0, 40).Select(i => Task.Run(async () =>
        {
            for (var order = 0; order < 25; order++) await journal.AppendAsync($"run-{i}", Entries.Range(order, order + 1));
        })));
        for (var i = 0; i < 40; i++) await Holds(journal, $"run-{i}", Entries.Range(0, 25));
    }

    /// <summary>The journal holds exactly these entries of the run after an order.</summary>
    public static async Task Holds(IJournal journal, string run, IReadOnlyList<JournalEntry> expected, long afterOrder = -1)
    {
        var count = 0;
        await foreach (var entry in journal.ReadAsync(run, afterOrder))
        {
            Unless(count < expected.Count, $"more than {expected.Count} entries of run {run}");
            Unless(Entries.Same(expected[count], entry), $"entry {entry.Order} of run {run} is another one than was appended");
            count++;
        }
        Equal(expected.Count, count, $"entries of run {run}");
    }
}
