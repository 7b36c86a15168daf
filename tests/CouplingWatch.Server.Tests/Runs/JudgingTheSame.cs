using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Testing;
using CsCheck;
using static CouplingWatch.Server.Tests.RunLines;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Runs;

public class JudgingTheSame(SharedWatch shared) : IClassFixture<SharedWatch>
{
    private static readonly string[] Views = ["/api/runs/leaf-1", "/api/runs/leaf-1/steps", "/api/runs/leaf-1/iterations", "/api/runs/leaf-1/advice", "/api/runs/leaf-1/settings/history", "/api/alerts?run=leaf-1"];

    [Fact]
    public async Task The_same_records_in_any_cut_give_the_same_judgement()
    {
        var lines = TroubledRun();
        var whole = await JudgementAsync([lines]);
        await Gen.Int[1, 12].Array[1, 40].SampleAsync(async cuts =>
        {
            List<IReadOnlyList<string>> posts = [];
            var at = 0;
            foreach (var size in cuts)
            {
                posts.Add([.. lines.Skip(at).Take(size)]);
                at += size;
            }
            posts.Add([.. lines.Skip(at)]);
            return await JudgementAsync(posts.Where(p => p.Count > 0)) == whole;
        }, iter: 12, threads: 1);
    }

    [Fact]
    public async Task A_restarted_server_judges_the_same_to_the_byte()
    {
        var journal = new MemoryJournal();
        string before;
        Microsoft.Extensions.Time.Testing.FakeTimeProvider time;
        await using (var watch = await StartAsync(journal))
        {
            time = watch.Time;
            await watch.AcceptAsync("leaf-1", Joined(TroubledRun()));
            using var put = await watch.Http.SendAsync(Api.Publishing.Put("leaf-1", 0, new { settings = new { filterThreshold = 1e-7 }, reason = "half of the columns are left out" }), TestContext.Current.CancellationToken);
            Assert.Equal(200, (int)put.StatusCode);
            var alert = (await watch.GetAsync("/api/alerts?run=leaf-1&state=open"))["items"]!.AsArray()[0]!["id"]!.GetValue<string>();
            using var shelved = await watch.Http.PostAsync($"/api/alerts/{alert}/shelve", Json(new { minutes = 30, reason = "looked at" }), TestContext.Current.CancellationToken);
            Assert.Equal(200, (int)shelved.StatusCode);
            before = await LookAsync(watch);
        }
        await using var again = await StartAsync(journal, time);
        Assert.Equal(before, await LookAsync(again));
    }

    [Theory]
    [InlineData("c10-polluted-basis")]
    [InlineData("c13-sawtooth")]
    [InlineData("c27-cured")]
    public async Task A_recording_is_judged_the_same_live_in_any_cut_restarted_in_the_middle_and_examined(string name)
    {
        var lines = (await File.ReadAllLinesAsync(ReferenceData.Path("recordings", name + ".ndjson"), TestContext.Current.CancellationToken)).Select(l => l + "\n").ToList();
        string whole, cut, examined;
        await using (var watch = shared.Room())
        {
            await watch.AcceptAsync("leaf-1", Joined(lines));
            whole = await LookAsync(watch);
            using var answer = await watch.Http.PostAsync("/api/examinations?run=leaf-1", RecordsBody(Joined(lines)), TestContext.Current.CancellationToken);
            examined = (await JsonOf(answer))["alerts"]!.ToJsonString();
            Assert.Equal((await AlertsBySeqAsync(watch)), examined);
        }
        var journal = new MemoryJournal();
        await using (var first = await StartAsync(journal)) await first.AcceptAsync("leaf-1", Joined(lines.Take(lines.Count / 2)));
        await using (var second = await StartAsync(journal))
        {
            foreach (var post in lines.Skip(lines.Count / 2).Chunk(7)) await second.AcceptAsync("leaf-1", Joined(post));
            cut = await LookAsync(second);
        }
        Assert.Equal(whole, cut);
    }

    [Fact]
    public async Task A_restarted_server_goes_on_where_the_run_is()
    {
        var journal = new MemoryJournal();
        await using (var watch = await StartAsync(journal)) await watch.AcceptAsync("leaf-1", Open() + Remark(1), Instance);
        await using var again = await StartAsync(journal);
        await FaultAsync(await again.PostAsync("leaf-1", Remark(1, "other")), 409, "seq-conflict");
        await FaultAsync(await again.PostAsync("leaf-1", Remark(2), "zzz"), 409, "run-exists");
        Assert.Equal(3, await again.AcceptAsync("leaf-1", Remark(1) + Remark(2), Instance));
    }

    [Fact]
    public async Task A_closed_run_stays_closed_and_readable_after_a_restart()
    {
        var journal = new MemoryJournal();
        await using (var watch = await StartAsync(journal)) await watch.AcceptAsync("leaf-1", Open() + Close(1));
        await using var again = await StartAsync(journal);
        await FaultAsync(await again.PostAsync("leaf-1", Remark(2)), 409, "run-closed");
        Assert.Equal("finished", (await again.GetAsync("/api/runs/leaf-1"))["summary"]!["state"]!.GetValue<string>());
    }

    private static IReadOnlyList<string> TroubledRun()
    {
        var lines = Steps(12).ToList();
        for (var k = 0; k < 10; k++) lines.Add(Iteration(lines.Count, 12, k, Math.Pow(10, -3 + 0.5 * k)));
        lines.Add(Step(lines.Count, 12, 10, "capped"));
        return lines;
    }

    private static async Task<string> AlertsBySeqAsync(WatchUnderTest watch)
    {
        var alerts = (await watch.GetAsync("/api/alerts?run=leaf-1&limit=1000"))["items"]!.AsArray().OrderBy(a => a!["seq"]!.GetValue<long>()).Select(a => a!.DeepClone());
        return new System.Text.Json.Nodes.JsonArray([.. alerts]).ToJsonString();
    }

    private async Task<string> JudgementAsync(IEnumerable<IReadOnlyList<string>> posts)
    {
        await using var watch = shared.Room();
        foreach (var post in posts) await watch.AcceptAsync("leaf-1", Joined(post));
        return await LookAsync(watch);
    }

    private static async Task<string> LookAsync(WatchUnderTest watch)
    {
        List<string> seen = [];
        foreach (var view in Views) seen.Add((await watch.GetAsync(view)).ToJsonString());
        Assert.Contains("\"check\"", seen[^1], StringComparison.Ordinal);
        return watch.Plain(string.Join('\n', seen));
    }
}
