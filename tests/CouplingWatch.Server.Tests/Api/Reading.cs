using static CouplingWatch.Server.Tests.RunLines;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Api;

public class Reading(SharedWatch shared) : IClassFixture<SharedWatch>
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Theory]
    [InlineData("")]
    [InlineData("/steps")]
    [InlineData("/iterations")]
    [InlineData("/basis")]
    [InlineData("/spectrum")]
    [InlineData("/advice")]
    [InlineData("/settings")]
    [InlineData("/settings/history")]
    public async Task A_run_that_is_not_there_is_a_problem(string part)
    {
        await using var watch = shared.Room();
        await FaultAsync(await watch.Http.GetAsync("/api/runs/nobody" + part, Cancel), 404, "unknown-run");
    }

    [Fact]
    public async Task A_call_that_is_not_there_is_a_problem()
    {
        await using var watch = shared.Room();
        await FaultAsync(await watch.Http.GetAsync("/api/nothing", Cancel), 404, "no-such-call");
    }

    [Fact]
    public async Task The_board_pages_by_name()
    {
        await using var watch = await StartAsync();
        foreach (var run in new[] { "c", "a", "e", "b", "d" }) await watch.AcceptAsync(run, Open());
        List<string> seen = [];
        string? after = null;
        do
        {
            var page = await watch.GetAsync("/api/runs?limit=2" + (after is null ? "" : "&after=" + after));
            seen.AddRange(page["items"]!.AsArray().Select(r => r!["run"]!.GetValue<string>()));
            after = page["next"]?.GetValue<string>();
        }
        while (after is not null);
        Assert.Equal(["a", "b", "c", "d", "e"], seen);
    }

    [Theory]
    [InlineData("campaign=north-lock", 2)]
    [InlineData("campaign=south-lock", 1)]
    [InlineData("state=finished", 1)]
    [InlineData("state=live&campaign=north-lock", 1)]
    [InlineData("label.thickness_mm=80", 3)]
    [InlineData("label.thickness_mm=60", 0)]
    public async Task The_board_is_filtered(string filter, int count)
    {
        await using var watch = await StartAsync();
        await watch.AcceptAsync("a", Open());
        await watch.AcceptAsync("b", Open() + Close(1));
        await watch.AcceptAsync("c", Open().Replace("north-lock", "south-lock"));
        Assert.Equal(count, (await watch.GetAsync("/api/runs?" + filter))["items"]!.AsArray().Count);
    }

    [Theory]
    [InlineData("/api/runs?limit=0", "limit")]
    [InlineData("/api/runs/leaf-1/steps?points=0", "points")]
    [InlineData("/api/runs/leaf-1/steps?from=5&to=2", "from")]
    [InlineData("/api/runs/leaf-1/basis?rule=harsh", "rule")]
    [InlineData("/api/runs/leaf-1/basis?threshold=2", "threshold")]
    [InlineData("/api/runs/leaf-1/settings?wait=9999", "wait")]
    [InlineData("/api/alerts?state=angry", "state")]
    [InlineData("/api/runs/leaf-1/steps?points=many", null)]
    public async Task A_parameter_out_of_its_range_is_named(string address, string? member)
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open());
        Assert.Equal(member, (await FaultAsync(await watch.Http.GetAsync(address, Cancel), 400, "bad-query"))["member"]?.GetValue<string>());
    }

    [Fact]
    public async Task Steps_and_iterations_are_what_was_sent()
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Joined(Steps(6, passes: 3)));
        var steps = (await watch.GetAsync("/api/runs/leaf-1/steps"))["items"]!.AsArray();
        Assert.Equal(6, steps.Count);
        Assert.All(steps, s => Assert.Equal(3, s!["worst"]!.GetValue<int>()));
        var iterations = (await watch.GetAsync("/api/runs/leaf-1/iterations?step=5"))["items"]!.AsArray();
        Assert.Equal([0.01, 0.0001, 0.000001], iterations.Select(i => i!["residuals"]!["deflection"]!.GetValue<double>()));
        await FaultAsync(await watch.Http.GetAsync("/api/runs/leaf-1/iterations?step=99", Cancel), 404, "not-kept");
    }

    [Fact]
    public async Task An_alert_is_acknowledged_shelved_and_taken_up_again()
    {
        await using var watch = await StartAsync();
        await watch.AcceptAsync("leaf-1", Open() + Iteration(1, 0, 0, double.NaN));
        var alert = (await watch.GetAsync("/api/alerts?state=open"))["items"]!.AsArray()[0]!;
        var id = alert["id"]!.GetValue<string>();
        Assert.Equal("divergence", alert["check"]!.GetValue<string>());
        Assert.Equal("unacknowledged", alert["state"]!.GetValue<string>());

        Assert.Equal("acknowledged", await ActAsync(watch, id, "acknowledge", null));
        await FaultAsync(await watch.Http.PostAsync($"/api/alerts/{id}/shelve", Json(new { minutes = 0, reason = "r" }), Cancel), 400, "malformed");
        await FaultAsync(await watch.Http.PostAsync($"/api/alerts/{id}/shelve", Json(new { minutes = 5 }), Cancel), 400, "malformed");
        Assert.Equal("shelved", await ActAsync(watch, id, "shelve", Json(new { minutes = 5, reason = "known" })));
        Assert.NotEqual("shelved", await ActAsync(watch, id, "unshelve", null));

        Assert.Equal("shelved", await ActAsync(watch, id, "shelve", Json(new { minutes = 5, reason = "known" })));
        watch.Time.Advance(TimeSpan.FromMinutes(6));
        await watch.UntilAsync(async () => (await watch.GetAsync("/api/alerts?state=shelved"))["items"]!.AsArray().Count == 0);
        await FaultAsync(await watch.Http.PostAsync("/api/alerts/leaf-1~nothing~9/acknowledge", null, Cancel), 404, "unknown-alert");
    }

    [Fact]
    public async Task A_recording_is_examined_and_not_kept()
    {
        await using var watch = await StartAsync();
        using var answer = await watch.Http.PostAsync("/api/examinations", RecordsBody(Open() + Iteration(1, 0, 0, double.NaN)), Cancel);
        var body = await JsonOf(answer);
        Assert.Equal("divergence", body["alerts"]!.AsArray()[0]!["check"]!.GetValue<string>());
        Assert.Equal(1, body["iterations"]!.GetValue<long>());
        Assert.NotEmpty(body["verdict"]!["text"]!.GetValue<string>());
        Assert.Empty((await watch.GetAsync("/api/runs"))["items"]!.AsArray());
        var problem = await FaultAsync(await watch.Http.PostAsync("/api/examinations", RecordsBody(Open() + "{\"kind\":\"iteration\",\"seq\":1}\n"), Cancel), 400, "malformed");
        Assert.Equal(2, problem["line"]!.GetValue<int>());
        await FaultAsync(await watch.Http.PostAsync("/api/examinations", RecordsBody(""), Cancel), 400, "malformed");
    }

    [Fact]
    public async Task Advice_that_is_not_there_is_neither_adopted_nor_dismissed()
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open());
        Assert.Empty((await watch.GetAsync("/api/runs/leaf-1/advice"))["items"]!.AsArray());
        await FaultAsync(await watch.Http.PostAsync("/api/runs/leaf-1/advice/none/adopt", Json(new { reason = "r" }), Cancel), 404, "unknown-advice");
        await FaultAsync(await watch.Http.PostAsync("/api/runs/leaf-1/advice/none/dismiss", Json(new { reason = "r" }), Cancel), 404, "unknown-advice");
    }

    [Fact]
    public async Task The_interface_describes_itself()
    {
        await using var watch = shared.Room();
        var paths = (await watch.GetAsync("/openapi/v1.json"))["paths"]!.AsObject();
        foreach (var path in new[] { "/api/runs/{run}/records", "/api/runs", "/api/runs/{run}/settings", "/api/runs/{run}/basis", "/api/alerts", "/api/examinations", "/healthz", "/readyz" })
            Assert.True(paths.ContainsKey(path), path);
    }

    [Fact]
    public async Task It_is_alive_and_ready()
    {
        await using var watch = shared.Room();
        Assert.Equal("alive", (await watch.GetAsync("/healthz"))["status"]!.GetValue<string>());
        await watch.UntilAsync(async () => (int)(await watch.Http.GetAsync("/readyz", Cancel)).StatusCode == 200);
    }

    private static async Task<string> ActAsync(WatchUnderTest watch, string id, string act, HttpContent? body)
    {
        using var answer = await watch.Http.PostAsync($"/api/alerts/{id}/{act}", body, Cancel);
        Assert.True(answer.IsSuccessStatusCode, await answer.Content.ReadAsStringAsync(Cancel));
        return (await JsonOf(answer))["state"]!.GetValue<string>();
    }
}
