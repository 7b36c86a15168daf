using System.Globalization;
using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Journal;
using static CouplingWatch.Server.Tests.RunLines;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Trials;

public class Racing
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Theory]
    [InlineData(false)]
    [InlineData(true)]
    public async Task The_run_takes_the_arms_over_in_turn_and_the_better_one_is_published(bool restarts)
    {
        var journal = new MemoryJournal();
        var run = new ObedientRun();
        var watch = await StartAsync(journal);
        try
        {
            await run.OpenAsync(watch, 14);
            var race = await RaceAsync(watch);
            var id = race["id"]!.GetValue<string>();
            for (var step = 0; step < 120 && race["state"]!.GetValue<string>() is "waiting" or "running"; step++)
            {
                if (restarts && step == 9)
                {
                    await watch.DisposeAsync();
                    watch = await StartAsync(journal);
                }
                await run.StepAsync(watch);
                race = await watch.GetAsync($"/api/runs/leaf-1/races/{id}");
            }
            Assert.Equal("publish", race["verdict"]!["code"]!.GetValue<string>());
            await run.StepAsync(watch);
            Assert.Equal(1e-7, run.Threshold);
            Assert.True(run.Revisions.Count > 3, "the arms took turns");
            Assert.All((await watch.GetAsync("/api/runs/leaf-1/settings/history"))["items"]!.AsArray().Skip(1), r => Assert.Equal(id, r!["by"]!.GetValue<string>()));
        }
        finally { await watch.DisposeAsync(); }
    }

    [Fact]
    public async Task While_a_race_runs_nobody_else_publishes_and_stopping_it_brings_the_settings_back()
    {
        await using var watch = await StartAsync();
        var run = new ObedientRun();
        await run.OpenAsync(watch, 14);
        var id = (await RaceAsync(watch))["id"]!.GetValue<string>();
        await FaultAsync(await watch.Http.PostAsync("/api/runs/leaf-1/races", Json(new { reason = "r" }), Cancel), 409, "race-running");
        for (var step = 0; step < 40 && run.Threshold != 1e-7; step++) await run.StepAsync(watch);
        Assert.Equal(1e-7, run.Threshold);
        await FaultAsync(await watch.Http.SendAsync(Api.Publishing.Put("leaf-1", run.Revisions[^1], new { settings = new { relaxation = 0.2 }, reason = "r" }), Cancel), 409, "race-running");

        using var stopped = await watch.Http.PostAsync($"/api/runs/leaf-1/races/{id}/stop", null, Cancel);
        Assert.Equal("stopped", (await JsonOf(stopped))["state"]!.GetValue<string>());
        await run.StepAsync(watch);
        Assert.Equal(0.01, run.Threshold);
        await FaultAsync(await watch.Http.PostAsync($"/api/runs/leaf-1/races/{id}/stop", null, Cancel), 409, "no-race");
        await FaultAsync(await watch.Http.GetAsync("/api/runs/leaf-1/races/race-9", Cancel), 404, "unknown-race");
    }

    [Fact]
    public async Task A_run_that_declared_nothing_adjustable_cannot_race()
    {
        await using var watch = await StartAsync();
        await watch.AcceptAsync("leaf-1", """{"kind":"open","seq":0,"format":1,"fields":[{"name":"deflection","relative":1e-6}],"settings":{"method":"iqn-ils","filterRule":"pivot-ratio","filterThreshold":0.01}}""" + "\n");
        await FaultAsync(await watch.Http.PostAsync("/api/runs/leaf-1/races", Json(new { reason = "r" }), Cancel), 409, "no-race");
    }

    private static async Task<JsonObject> RaceAsync(WatchUnderTest watch)
    {
        using var started = await watch.Http.PostAsync("/api/runs/leaf-1/races", Json(new { challengers = new[] { new { filterThreshold = 1e-7 } }, seed = 7, reason = "half of the columns are left out" }), Cancel);
        Assert.True(started.IsSuccessStatusCode, await started.Content.ReadAsStringAsync(Cancel));
        return await JsonOf(started);
    }

    /// <summary>A run that reads its settings before each step, takes them over, and needs three passes with the low threshold, eight with any other.</summary>
    private sealed class ObedientRun
    {
        private int next;
        private int step;
        private JsonNode settings = new JsonObject();

        public double Threshold { get; private set; } = 0.01;

        public List<int> Revisions { get; } = [0];

        public async Task OpenAsync(WatchUnderTest watch, int steps)
        {
            await watch.AcceptAsync("leaf-1", Open(), Instance);
            next = 1;
            for (var i = 0; i < steps; i++) await StepAsync(watch);
        }

        public async Task StepAsync(WatchUnderTest watch)
        {
            var newest = await watch.GetAsync("/api/runs/leaf-1/settings?instance=" + Instance);
            List<string> lines = [];
            if (newest["revision"]!.GetValue<int>() is var revision && revision > Revisions[^1])
            {
                Revisions.Add(revision);
                settings = newest["settings"]!;
                Threshold = settings["filterThreshold"]!.GetValue<double>();
                lines.Add(string.Create(CultureInfo.InvariantCulture, $"{{\"kind\":\"applied\",\"seq\":{next++},\"revision\":{revision},\"fromStep\":{step},\"settings\":{settings.ToJsonString()}}}\n"));
            }
            var passes = Threshold < 1e-6 ? 3 : 8;
            for (var k = 0; k < passes; k++) lines.Add(Iteration(next++, step, k, Math.Pow(10, -2 - 6.0 * k / (passes - 1))));
            lines.Add(Step(next++, step++, passes));
            await watch.AcceptAsync("leaf-1", Joined(lines), Instance);
        }
    }
}
