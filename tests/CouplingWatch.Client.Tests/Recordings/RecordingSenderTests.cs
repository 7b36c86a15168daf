using System.Net;
using CouplingWatch.Client.Recordings;
using CouplingWatch.Records;
using CouplingWatch.Testing;
using CouplingWatch.Testing.Servers;
using CouplingWatch.Wire;
using Microsoft.Extensions.Time.Testing;

namespace CouplingWatch.Client.Tests.Recordings;

public sealed class RecordingSenderTests : IDisposable
{
    private const string Open = """{"kind":"open","seq":0,"format":1,"instance":"6f1c","fields":[{"name":"a"}],"ünit":"kept"}""";
    private static readonly Uri Address = new("http://watch.test:5000");
    private readonly DirectoryInfo folder = Directory.CreateTempSubdirectory("couplingwatch-");
    private readonly FakeServer server = new();
    private readonly FakeTimeProvider time = new();

    private RunSenderOptions Options => new() { Handler = server, Time = time, AnswerTimeout = RunSenderOptions.LongestTimeout, BatchRecords = 50 };

    private string File => Path.Combine(folder.FullName, "leaf.ndjson");

    private static string Line(int seq) => $$$"""{"kind":"iteration","seq":{{{seq}}},"step":0,"iteration":{{{seq}}},"residuals":{"a":1}}""";

    public void Dispose() => folder.Delete(true);

    private Task<SentRecording> Send(int tries = 8) => time.Until(RecordingSender.SendAsync(Address, "leaf", File, Options, tries, TestContext.Current.CancellationToken));

    [Fact]
    public async Task A_recording_arrives_whole_and_sending_it_again_changes_nothing()
    {
        var path = ReferenceData.Path("recordings", "c20-level-0-steady.ndjson");
        var records = System.IO.File.ReadLines(path).Count();
        for (var i = 0; i < 2; i++)
        {
            var sent = await time.Until(RecordingSender.SendAsync(Address, "leaf", path, Options, cancel: TestContext.Current.CancellationToken));
            Assert.Equal(new SentRecording("leaf", records, null), sent);
            Assert.Equal(records, server.Kept.Count);
        }
        Assert.All(server.Queries, q => Assert.Equal("/api/runs/leaf/records?instance=524def3859920f8a", q));
    }

    [Fact]
    public async Task Gaps_unreadable_lines_and_refused_records_keep_their_place_and_a_torn_tail_is_left_out()
    {
        await System.IO.File.WriteAllTextAsync(File, $"{Open}\n{Line(1)}\nnonsense\n{Line(5)}\n{Line(6)}\n{Line(7)[..30]}", TestContext.Current.CancellationToken);
        server.Refuses = r => r.Seq == 5 && r is IterationRecord ? "not this one" : null;
        var sent = await Send();
        Assert.Equal((7L, null), (sent.Records, sent.Problem));
        Assert.Equal(["open", "iteration", "remark", "skipped", "skipped", "remark", "iteration"], server.Kept.Select(r => r.Kind));
    }

    [Fact]
    public async Task A_server_that_is_away_is_tried_again_and_given_up_in_the_end()
    {
        await System.IO.File.WriteAllTextAsync(File, $"{Open}\n{Line(1)}\n", TestContext.Current.CancellationToken);
        server.Next(HttpStatusCode.ServiceUnavailable);
        Assert.Null((await Send()).Problem);
        server.Down = true;
        Assert.Contains("connection refused", (await Send(3)).Problem, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_taken_name_and_a_file_without_records_are_said()
    {
        await System.IO.File.WriteAllTextAsync(File, $"{Open}\n", TestContext.Current.CancellationToken);
        server.Next(HttpStatusCode.Conflict, "run-exists");
        Assert.StartsWith("409", (await Send()).Problem, StringComparison.Ordinal);
        await System.IO.File.WriteAllTextAsync(File, "", TestContext.Current.CancellationToken);
        Assert.Equal("the file holds no record", (await Send()).Problem);
        await System.IO.File.WriteAllTextAsync(File, "a;b;c\n", TestContext.Current.CancellationToken);
        Assert.Contains("line 1", (await Send()).Problem, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_growing_file_is_followed_to_its_close_and_settings_come_back_beside_it()
    {
        await System.IO.File.WriteAllTextAsync(File, $"{Open}\n{Line(1)[..20]}", TestContext.Current.CancellationToken);
        var following = RecordingSender.FollowAsync(Address, "leaf", File, Options, TestContext.Current.CancellationToken);
        await time.Until(() => server.Kept.Count == 1);
        server.Revision = 2;
        server.Settings = new SettingsRevision { Revision = 2, Settings = new CouplingSettings { Relaxation = 0.2 } };
        await System.IO.File.AppendAllTextAsync(File, $"{Line(1)[20..]}\n{Line(2)}\n", TestContext.Current.CancellationToken);
        await time.Until(() => server.Kept.Count == 3);
        await time.Until(() => System.IO.File.Exists(Path.Combine(folder.FullName, "leaf.settings.json")));
        Assert.False(following.IsCompleted);
        await System.IO.File.AppendAllTextAsync(File, """{"kind":"close","seq":3,"outcome":"finished"}""" + "\n", TestContext.Current.CancellationToken);
        Assert.Equal(new SentRecording("leaf", 4, null), await time.Until(following));
    }

    [Fact]
    public async Task A_run_is_closed_from_outside_even_when_its_last_records_come_in_between()
    {
        Assert.Equal("there is no run leaf", await RunCloser.CloseAsync(Address, "leaf", CloseOutcome.Aborted, null, Options, TestContext.Current.CancellationToken));
        await System.IO.File.WriteAllTextAsync(File, $"{Open}\n{Line(1)}\n", TestContext.Current.CancellationToken);
        await Send();
        server.Before = () => server.Add(new RemarkRecord { Seq = 2, Text = "last words" });
        Assert.Null(await RunCloser.CloseAsync(Address, "leaf", CloseOutcome.Aborted, "wall limit", Options, TestContext.Current.CancellationToken));
        Assert.Equal(["open", "iteration", "remark", "close"], server.Kept.Select(r => r.Kind));
        Assert.Equal("wall limit", Assert.IsType<CloseRecord>(server.Kept[^1]).Reason);
    }
}
