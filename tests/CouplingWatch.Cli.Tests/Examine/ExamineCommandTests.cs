using System.Text.Json;
using CouplingWatch.Cli.Examine;
using CouplingWatch.Testing;
using CouplingWatch.Wire;

namespace CouplingWatch.Cli.Tests.Examine;

public sealed class ExamineCommandTests : IDisposable
{
    private readonly DirectoryInfo folder = Directory.CreateTempSubdirectory("couplingwatch-cli-");

    public void Dispose() => folder.Delete(recursive: true);

    [Fact]
    public async Task A_healthy_recording_raises_nothing_and_exits_with_zero()
    {
        var (exit, output, _) = await Run([Recording("c01-steady-leaf")], failOn: Severity.Note);
        Assert.Equal(0, exit);
        Assert.Contains("Nothing that anybody needs to answer.", output);
    }

    [Fact]
    public async Task A_diverging_recording_exits_with_one_and_says_what_to_change()
    {
        var (exit, output, _) = await Run([Recording("c06-relaxation-too-large")], failOn: Severity.Critical);
        Assert.Equal(1, exit);
        Assert.Contains("divergence", output);
        Assert.Contains("lower the relaxation", output);
    }

    [Fact]
    public async Task Without_a_named_severity_even_a_divergence_exits_with_zero()
    {
        var (exit, _, _) = await Run([Recording("c06-relaxation-too-large")]);
        Assert.Equal(0, exit);
    }

    [Fact]
    public async Task The_json_has_the_members_of_the_interface_in_one_object_a_line()
    {
        var (_, output, _) = await Run([Recording("c11-starved-basis"), Recording("c01-steady-leaf")], json: true);
        var lines = output.Split('\n', StringSplitOptions.RemoveEmptyEntries);
        Assert.Equal(2, lines.Length);
        using var first = JsonDocument.Parse(lines[0]);
        var root = first.RootElement;
        foreach (var member in new[] { "file", "verdict", "steps", "iterations", "alerts", "advice", "notJudged" }) Assert.True(root.TryGetProperty(member, out _), member);
        Assert.Equal(210, root.GetProperty("iterations").GetInt64());
        var alert = root.GetProperty("alerts")[0];
        Assert.Equal(("starved", "warning", 9), (alert.GetProperty("check").GetString(), alert.GetProperty("severity").GetString(), alert.GetProperty("seq").GetInt32()));
        var seqs = root.GetProperty("alerts").EnumerateArray().Select(a => a.GetProperty("seq").GetInt64()).ToArray();
        Assert.Equal(seqs.Order(), seqs);
    }

    [Fact]
    public async Task A_baseline_keeps_known_alerts_from_failing_the_build()
    {
        var (_, earlier, _) = await Run([Recording("c11-starved-basis")], json: true);
        var baseline = Write("earlier.json", earlier);
        var (known, _, _) = await Run([Recording("c11-starved-basis")], failOn: Severity.Note, baseline: baseline);
        Assert.Equal(0, known);
        var (other, _, _) = await Run([Recording("c06-relaxation-too-large")], failOn: Severity.Note, baseline: baseline);
        Assert.Equal(1, other);
    }

    [Fact]
    public async Task A_bad_record_exits_with_two_and_names_line_and_member()
    {
        var lines = (await File.ReadAllLinesAsync(Recording("c20-level-0-steady").FullName, TestContext.Current.CancellationToken)).Take(6).ToArray();
        lines[4] = """{"kind":"iteration","seq":4,"step":"three","iteration":3,"residuals":{"deflection":1e-3}}""";
        var (exit, _, errors) = await Run([Write("bad.ndjson", string.Join('\n', lines) + "\n")]);
        Assert.Equal(2, exit);
        Assert.Contains("line 5, member step", errors);
    }

    [Fact]
    public async Task A_half_written_last_line_is_passed_over_and_said()
    {
        var text = string.Join('\n', (await File.ReadAllLinesAsync(Recording("c20-level-0-steady").FullName, TestContext.Current.CancellationToken)).Take(40));
        var (exit, output, _) = await Run([Write("torn.ndjson", text[..^30])]);
        Assert.Equal(0, exit);
        Assert.Contains("the last line ends after", output);
    }

    [Fact]
    public async Task An_empty_or_missing_file_exits_with_two()
    {
        Assert.Equal(2, (await Run([Write("empty.ndjson", "")])).Exit);
        Assert.Equal(2, (await Run([new FileInfo(Path.Combine(folder.FullName, "nowhere.ndjson"))])).Exit);
    }

    [Fact]
    public async Task A_recording_that_just_ends_is_silent_at_its_last_record()
    {
        var (_, output, _) = await Run([Recording("c17-silent")], json: true);
        var examination = JsonSerializer.Deserialize<Examination>(output, WireJson.Options)!;
        Assert.Contains(examination.Alerts, a => a.Check == "silent");
    }

    private static FileInfo Recording(string name) => new(ReferenceData.Path("recordings", name + ".ndjson"));

    private FileInfo Write(string name, string text)
    {
        var path = Path.Combine(folder.FullName, name);
        File.WriteAllText(path, text);
        return new FileInfo(path);
    }

    private static async Task<(int Exit, string Output, string Errors)> Run(FileInfo[] files, bool json = false, Severity? failOn = null, FileInfo? baseline = null)
    {
        using var output = new StringWriter { NewLine = "\n" };
        using var errors = new StringWriter { NewLine = "\n" };
        var exit = await ExamineCommand.RunAsync(files, json, failOn, baseline, output, errors, TestContext.Current.CancellationToken);
        return (exit, output.ToString(), errors.ToString());
    }
}
