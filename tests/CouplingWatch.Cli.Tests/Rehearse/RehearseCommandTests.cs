using System.Text.Json.Nodes;
using CouplingWatch.Cli.Rehearse;
using CouplingWatch.Testing;

namespace CouplingWatch.Cli.Tests.Rehearse;

public sealed class RehearseCommandTests
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    private static FileInfo Recording(string prefix) => new(ReferenceData.Recordings().Single(f => Path.GetFileName(f).StartsWith(prefix, StringComparison.Ordinal)));

    private static async Task<(int Exit, string Output, string Errors)> RunAsync(FileInfo file, int? until = null, string? candidates = null, bool json = true)
    {
        FileInfo? list = null;
        if (candidates is not null)
        {
            list = new FileInfo(Path.GetTempFileName());
            await File.WriteAllTextAsync(list.FullName, candidates, Cancel);
        }
        try
        {
            var (output, errors) = (new StringWriter(), new StringWriter());
            var exit = await RehearseCommand.RunAsync([file], until, list, json, output, errors, Cancel);
            return (exit, output.ToString(), errors.ToString());
        }
        finally
        {
            list?.Delete();
        }
    }

    [Fact]
    public async Task Given_candidates_are_scored_against_the_calibration()
    {
        var (exit, output, _) = await RunAsync(Recording("c03"), candidates: """[{"historySteps":4},{"historySteps":8}]""");
        var answer = JsonNode.Parse(output)!;
        Assert.Equal(0, exit);
        Assert.Equal(["file", "calibration", "candidates", "proposal", "caveat"], answer.AsObject().Select(m => m.Key));
        Assert.True((bool)answer["calibration"]!["trusted"]!);
        Assert.Equal(12, (int)answer["calibration"]!["steps"]!);
        Assert.Equal(2, answer["candidates"]!.AsArray().Count);
        Assert.InRange((double)answer["proposal"]!["mean"]!, 4, 5.5);
        Assert.Equal(["historySteps"], answer["proposal"]!["settings"]!.AsObject().Select(m => m.Key));
    }

    [Fact]
    public async Task Declining_is_no_error_and_says_why()
    {
        var (exit, output, _) = await RunAsync(Recording("c11"));
        var answer = JsonNode.Parse(output)!;
        Assert.Equal(0, exit);
        Assert.False((bool)answer["calibration"]!["trusted"]!);
        Assert.NotNull((string?)answer["calibration"]!["why"]);
        Assert.True(answer.AsObject().ContainsKey("proposal"));
        Assert.Null(answer["proposal"]);
    }

    [Fact]
    public async Task Steps_after_the_named_one_are_left_out()
    {
        var (_, output, _) = await RunAsync(Recording("c01"), until: 8, candidates: "[]");
        Assert.Equal(5, (int)JsonNode.Parse(output)!["calibration"]!["steps"]!);
    }

    [Fact]
    public async Task The_page_names_the_proposal_in_words()
    {
        var (exit, output, _) = await RunAsync(Recording("c03"), candidates: """[{"historySteps":8}]""", json: false);
        Assert.Equal(0, exit);
        Assert.Contains("trusted", output, StringComparison.Ordinal);
        Assert.Contains("Proposed for a race: history 8", output, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("{", "--candidates")]
    [InlineData("""[{"historySteps":"many"}]""", "--candidates")]
    public async Task A_list_that_is_none_is_an_unreadable_call(string list, string says)
    {
        var (exit, output, errors) = await RunAsync(Recording("c01"), candidates: list);
        Assert.Equal((2, ""), (exit, output));
        Assert.Contains(says, errors, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_missing_file_is_named()
    {
        var (exit, _, errors) = await RunAsync(new FileInfo("nowhere.ndjson"));
        Assert.Equal(2, exit);
        Assert.Contains("nowhere.ndjson", errors, StringComparison.Ordinal);
    }
}
