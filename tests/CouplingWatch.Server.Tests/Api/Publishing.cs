using System.Net.Http.Headers;
using System.Text.Json.Nodes;
using static CouplingWatch.Server.Tests.RunLines;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Api;

public class Publishing(SharedWatch shared) : IClassFixture<SharedWatch>
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Fact]
    public async Task Revision_0_is_what_the_run_declared()
    {
        await using var watch = await StartedAsync();
        using var answer = await watch.Http.GetAsync("/api/runs/leaf-1/settings", Cancel);
        var body = await JsonOf(answer);
        Assert.Equal("\"0\"", answer.Headers.ETag?.Tag);
        Assert.Equal(0, body["revision"]!.GetValue<int>());
        Assert.Equal(0.01, body["settings"]!["filterThreshold"]!.GetValue<double>());
    }

    [Fact]
    public async Task A_revision_is_followed_from_published_over_picked_up_to_applied()
    {
        await using var watch = await StartedAsync();
        using var put = await watch.Http.SendAsync(Put("leaf-1", 0, Lower()), Cancel);
        Assert.Equal("\"1\"", put.Headers.ETag?.Tag);
        Assert.Equal("published", await StateAsync(watch));

        var read = await watch.GetAsync("/api/runs/leaf-1/settings?instance=" + Instance);
        Assert.Equal(1e-7, read["settings"]!["filterThreshold"]!.GetValue<double>());
        Assert.Equal(0.1, read["settings"]!["relaxation"]!.GetValue<double>());
        Assert.Equal("picked-up", await StateAsync(watch));

        await watch.AcceptAsync("leaf-1", """{"kind":"applied","seq":1,"revision":1,"fromStep":0,"settings":{"method":"iqn-ils","relaxation":0.1,"historySteps":4,"filterRule":"pivot-ratio","filterThreshold":1e-7,"iterationCap":40}}""" + "\n");
        Assert.Equal("applied", await StateAsync(watch));
        var history = (await watch.GetAsync("/api/runs/leaf-1/settings/history"))["items"]!.AsArray();
        Assert.Equal([0, 1], history.Select(r => r!["revision"]!.GetValue<int>()));
        Assert.Equal("half of the columns are left out", history[1]!["reason"]!.GetValue<string>());
        Assert.Equal("filterThreshold", history[1]!["changes"]![0]!["setting"]!.GetValue<string>());
    }

    [Fact]
    public async Task A_viewer_who_reads_the_settings_does_not_pick_them_up()
    {
        await using var watch = await StartedAsync();
        using var put = await watch.Http.SendAsync(Put("leaf-1", 0, Lower()), Cancel);
        await watch.GetAsync("/api/runs/leaf-1/settings");
        await watch.GetAsync("/api/runs/leaf-1/settings?instance=another");
        Assert.Equal("published", await StateAsync(watch));
    }

    [Fact]
    public async Task The_refusal_of_the_code_is_shown_with_its_reason()
    {
        await using var watch = await StartedAsync();
        using var put = await watch.Http.SendAsync(Put("leaf-1", 0, Lower()), Cancel);
        await watch.AcceptAsync("leaf-1", """{"kind":"applied","seq":1,"revision":1,"refused":"not while the vessel touches"}""" + "\n");
        var newest = await watch.GetAsync("/api/runs/leaf-1/settings");
        Assert.Equal("refused", newest["state"]!.GetValue<string>());
        Assert.Equal("not while the vessel touches", newest["refused"]!.GetValue<string>());
    }

    [Fact]
    public async Task A_post_answers_the_newest_revision()
    {
        await using var watch = await StartedAsync();
        using var put = await watch.Http.SendAsync(Put("leaf-1", 0, Lower()), Cancel);
        using var answer = await watch.PostAsync("leaf-1", Remark(1));
        Assert.Equal("""{"next":2,"revision":1}""", await answer.Content.ReadAsStringAsync(Cancel));
    }

    [Fact]
    public async Task What_did_not_change_is_304_and_a_waiting_answer_comes_with_the_change()
    {
        await using var watch = await StartedAsync();
        using var unchanged = await watch.Http.SendAsync(GetUnless(0, ""), Cancel);
        Assert.Equal(304, (int)unchanged.StatusCode);
        var waiting = watch.Http.SendAsync(GetUnless(0, "?wait=30"), Cancel);
        using var put = await watch.Http.SendAsync(Put("leaf-1", 0, Lower()), Cancel);
        using var changed = await waiting;
        Assert.Equal(200, (int)changed.StatusCode);
        Assert.Equal(1, (await JsonOf(changed))["revision"]!.GetValue<int>());
    }

    [Fact]
    public async Task A_waiting_answer_is_304_when_its_time_is_over()
    {
        await using var watch = await StartedAsync();
        var waiting = watch.Http.SendAsync(GetUnless(0, "?wait=30"), Cancel);
        await watch.UntilAsync(() =>
        {
            watch.Time.Advance(TimeSpan.FromSeconds(10));
            return Task.FromResult(waiting.IsCompleted);
        });
        Assert.Equal(304, (int)(await waiting).StatusCode);
    }

    [Fact]
    public async Task A_proposal_says_which_revision_it_was_made_from()
    {
        await using var watch = await StartedAsync();
        await FaultAsync(await watch.Http.PutAsync("/api/runs/leaf-1/settings", Json(Lower()), Cancel), 428, "if-match-missing");
        await FaultAsync(await watch.Http.SendAsync(Put("leaf-1", 3, Lower()), Cancel), 412, "stale-revision");
        using var first = await watch.Http.SendAsync(Put("leaf-1", 0, Lower()), Cancel);
        await FaultAsync(await watch.Http.SendAsync(Put("leaf-1", 0, Lower(1e-6)), Cancel), 412, "stale-revision");
        Assert.Equal(2, (await watch.GetAsync("/api/runs/leaf-1/settings/history"))["items"]!.AsArray().Count);
    }

    public static TheoryData<string, int, string, string> Refused => new()
    {
        { """{"settings":{"predictorOrder":2},"reason":"r"}""", 409, "not-adjustable", "predictorOrder" },
        { """{"settings":{"tolerance":1e-5},"reason":"r","confirm":true}""", 409, "not-adjustable", "tolerance" },
        { """{"settings":{"relaxation":2},"reason":"r"}""", 422, "out-of-range", "relaxation" },
        { """{"settings":{"filterRule":"none"},"reason":"r"}""", 422, "out-of-range", "filterRule" },
        { """{"settings":{"iterationCap":60},"reason":"r"}""", 422, "unconfirmed", "iterationCap" },
        { """{"settings":{"relaxation":0.2}}""", 400, "malformed", "reason" },
        { """{"settings":{"relaxation":0.1},"reason":"r"}""", 400, "malformed", "settings" },
        { """{"settings":{"relaxation":"more"},"reason":"r"}""", 400, "malformed", "settings.relaxation" },
        { """{"settings":{},"commands":["explode"],"reason":"r"}""", 409, "not-adjustable", "explode" },
        { """{"settings":{"relaxation":0.2},"reason":"r","fallbackTo":7}""", 400, "malformed", "fallbackTo" },
    };

    [Theory]
    [MemberData(nameof(Refused))]
    public async Task What_the_run_did_not_declare_is_refused_by_name_and_range(string body, int status, string name, string member)
    {
        await using var watch = await StartedAsync();
        using var request = Put("leaf-1", 0, new JsonObject());
        request.Content = new StringContent(body, new MediaTypeHeaderValue("application/json"));
        var problem = await FaultAsync(await watch.Http.SendAsync(request, Cancel), status, name);
        Assert.Equal(member, problem["member"]!.GetValue<string>());
        Assert.Equal(0, (await watch.GetAsync("/api/runs/leaf-1/settings"))["revision"]!.GetValue<int>());
    }

    [Fact]
    public async Task The_cap_changes_with_a_confirmation_and_is_marked_as_altering_the_result()
    {
        await using var watch = await StartedAsync();
        using var put = await watch.Http.SendAsync(Put("leaf-1", 0, new { settings = new { iterationCap = 60 }, reason = "r", confirm = true }), Cancel);
        Assert.Equal("result", (await JsonOf(put))["changes"]![0]!["alters"]!.GetValue<string>());
    }

    [Fact]
    public async Task Nothing_is_published_to_a_closed_run()
    {
        await using var watch = await StartedAsync();
        await watch.AcceptAsync("leaf-1", Close(1));
        await FaultAsync(await watch.Http.SendAsync(Put("leaf-1", 0, Lower()), Cancel), 409, "run-closed");
    }

    [Theory]
    [InlineData("after-step", "stop")]
    [InlineData("after-checkpoint", "stop:after-checkpoint")]
    public async Task Asking_to_stop_publishes_the_command(string when, string command)
    {
        await using var watch = await StartedAsync();
        using var answer = await watch.Http.PostAsync("/api/runs/leaf-1/ask-to-stop", Json(new { when, reason = "the queue is needed" }), Cancel);
        Assert.Equal(command, (await JsonOf(answer))["commands"]![0]!.GetValue<string>());
    }

    [Fact]
    public async Task A_step_that_gives_up_under_a_revision_with_a_way_back_brings_the_earlier_settings_back()
    {
        await using var watch = await StartedAsync();
        using var put = await watch.Http.SendAsync(Put("leaf-1", 0, new { settings = new { filterThreshold = 1e-7 }, reason = "r", fallbackTo = 0 }), Cancel);
        await watch.AcceptAsync("leaf-1", """{"kind":"applied","seq":1,"revision":1,"fromStep":0,"settings":{"method":"iqn-ils","relaxation":0.1,"historySteps":4,"filterRule":"pivot-ratio","filterThreshold":1e-7,"iterationCap":40}}""" + "\n"
            + Iteration(2, 0, 0) + Step(3, 0, 1, "capped"));
        var newest = await watch.GetAsync("/api/runs/leaf-1/settings");
        Assert.Equal(2, newest["revision"]!.GetValue<int>());
        Assert.Equal("fall-back", newest["by"]!.GetValue<string>());
        Assert.Equal(0.01, newest["settings"]!["filterThreshold"]!.GetValue<double>());
    }

    public static HttpRequestMessage Put(string run, int madeFrom, object body)
    {
        var request = new HttpRequestMessage(HttpMethod.Put, $"/api/runs/{run}/settings") { Content = Json(body) };
        request.Headers.IfMatch.Add(new EntityTagHeaderValue($"\"{madeFrom}\""));
        return request;
    }

    private static HttpRequestMessage GetUnless(int revision, string query)
    {
        var request = new HttpRequestMessage(HttpMethod.Get, "/api/runs/leaf-1/settings" + query);
        request.Headers.IfNoneMatch.Add(new EntityTagHeaderValue($"\"{revision}\""));
        return request;
    }

    private static object Lower(double threshold = 1e-7) => new { settings = new { filterThreshold = threshold }, reason = "half of the columns are left out" };

    private async Task<WatchUnderTest> StartedAsync()
    {
        var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open(), Instance);
        return watch;
    }

    private static async Task<string> StateAsync(WatchUnderTest watch) =>
        (await watch.GetAsync("/api/runs/leaf-1/settings/history"))["items"]!.AsArray()[^1]!["state"]!.GetValue<string>();
}
