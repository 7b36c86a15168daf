using System.Text;
using CouplingWatch.Ndjson;
using CouplingWatch.Recordings;
using CouplingWatch.Records;

namespace CouplingWatch.StreamTests.Recordings;

public sealed class RecordingFileTests
{
    private const string Open = """{"kind":"open","seq":0,"format":1,"at":"2026-12-01T08:00:00Z","fields":[{"name":"a"}]}""";
    private const string First = """{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1}}""";
    private const string Second = """{"kind":"iteration","seq":2,"at":"2026-12-01T08:00:09Z","step":0,"iteration":1,"residuals":{"a":0.5}}""";

    private static async Task<List<RecordingItem>> Read(string text)
    {
        var items = new List<RecordingItem>();
        using var stream = new MemoryStream(Encoding.UTF8.GetBytes(text));
        await foreach (var item in RecordingFile.ReadAsync(stream, cancel: TestContext.Current.CancellationToken)) items.Add(item);
        return items;
    }

    private static string[] Kinds(IEnumerable<RecordingItem> items) => [.. items.Select(i => i.Record?.Kind ?? i.Note?.Kind.ToString() ?? i.Problem!.Code)];

    [Fact]
    public async Task A_record_without_a_time_has_the_time_of_the_one_before_it()
    {
        var items = await Read($"{Open}\n{First}\n{Second}\n");
        Assert.Equal([0, 0, 9], items.Select(i => i.Received.Second));
    }

    [Fact]
    public async Task A_half_written_last_line_is_passed_over_and_noted()
    {
        var torn = (await Read($"{Open}\n{First}\n{Second[..40]}"));
        Assert.Equal(["open", "iteration", "TornTail"], Kinds(torn));
        Assert.Equal(["open", "iteration", "iteration"], Kinds(await Read($"{Open}\n{First}\n{Second}")));
        Assert.Equal(["open", "malformed", "iteration"], Kinds(await Read($"{Open}\n{Second[..40]}\n{First}")));
    }

    [Fact]
    public async Task Blocks_of_NUL_bytes_are_passed_over_and_noted_wherever_they_stand()
    {
        var nul = new string('\0', 4096);
        Assert.Equal(["open", "NulBlock", "iteration", "iteration"], Kinds(await Read($"{Open}\n{nul}{First}\n{Second}\n")));
        Assert.Equal(["open", "NulBlock", "iteration"], Kinds(await Read($"{Open}\n{nul}\n{First}\n")));
        Assert.Equal(["open", "NulBlock", "Gap", "iteration"], Kinds(await Read($"{Open}\n{First[..20]}{nul}{Second}\n")));
        Assert.Equal(["open", "iteration", "NulBlock"], Kinds(await Read($"{Open}\n{First}\n{Second[..30]}{nul}")));
    }

    [Fact]
    public async Task A_record_sent_twice_counts_once_and_another_one_with_its_seq_is_a_problem()
    {
        Assert.Equal(["open", "iteration", "Resent", "iteration"], Kinds(await Read($"{Open}\n{First}\n{First}\n{Second}\n")));
        var items = await Read($"{Open}\n{First}\n{First.Replace("\"a\":1", "\"a\":2", StringComparison.Ordinal)}\n");
        Assert.Equal(["open", "iteration", ProblemCodes.SeqConflict], Kinds(items));
        Assert.Equal("line 3, member seq: expected 2 (a seq stands for one record only), found 1 with other content", items[^1].Problem!.Sentence);
    }

    [Fact]
    public async Task A_gap_is_noted_and_reading_goes_on() =>
        Assert.Equal(["open", "Gap", "iteration"], Kinds(await Read($"{Open}\n{Second}\n")));

    [Fact]
    public async Task A_file_that_does_not_begin_with_open_is_no_stream()
    {
        var items = await Read($"{First}\n{Second}\n");
        Assert.Equal([ProblemCodes.MissingOpen], Kinds(items));
        Assert.Equal([ProblemCodes.WrongType, ProblemCodes.Malformed], Kinds(await Read("[1,2]\nstep;iteration\n")));
    }

    [Fact]
    public async Task Progress_ends_with_the_whole_file()
    {
        var path = Path.Combine(Path.GetTempPath(), $"recording-{Guid.NewGuid():N}.ndjson");
        try
        {
            await File.WriteAllTextAsync(path, $"{Open}\n{First}\n", TestContext.Current.CancellationToken);
            var seen = new Seen();
            await foreach (var item in RecordingFile.ReadAsync(path, seen, TestContext.Current.CancellationToken)) Assert.NotNull(item.Record);
            Assert.Equal((1.0, 2L), (seen.Last.Share, seen.Last.Lines));
        }
        finally
        {
            File.Delete(path);
        }
    }

    private sealed class Seen : IProgress<RecordingProgress>
    {
        public RecordingProgress Last { get; private set; }

        public void Report(RecordingProgress value) => Last = value;
    }
}
