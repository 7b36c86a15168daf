using CouplingWatch.Monitoring.Rehearsal;
using CouplingWatch.Ndjson;
using CouplingWatch.Server.Trials;
using CouplingWatch.Testing;
using static CouplingWatch.Server.Tests.RunLines;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Trials;

public class Rehearsing
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Fact]
    public async Task A_rehearsal_is_started_followed_and_answered()
    {
        await using var watch = await StartAsync();
        await watch.AcceptAsync("leaf-1", await File.ReadAllTextAsync(ReferenceData.Path("recordings", "c03-bumpy-leaf.ndjson"), Cancel));
        using var started = await watch.Http.PostAsync("/api/runs/leaf-1/rehearsals", Json(new { candidates = new[] { new { filterRule = "own-norm", filterThreshold = 1e-7 } } }), Cancel);
        Assert.Equal(202, (int)started.StatusCode);
        var place = started.Headers.Location!.ToString();
        await watch.UntilAsync(async () => (await watch.GetAsync(place))["state"]!.GetValue<string>() == "done");
        var result = (await watch.GetAsync(place))["result"]!;
        Assert.True(result["calibration"]!["steps"]!.GetValue<int>() > 0);
        Assert.NotEmpty(result["caveat"]!.GetValue<string>());
    }

    [Fact]
    public async Task A_run_without_vectors_is_declined_with_the_reason()
    {
        await using var watch = await StartAsync();
        await watch.AcceptAsync("leaf-1", Joined(Steps(20)));
        using var started = await watch.Http.PostAsync("/api/runs/leaf-1/rehearsals", null, Cancel);
        var place = started.Headers.Location!.ToString();
        await watch.UntilAsync(async () => (await watch.GetAsync(place))["state"]!.GetValue<string>() == "done");
        var calibration = (await watch.GetAsync(place))["result"]!["calibration"]!;
        Assert.False(calibration["trusted"]!.GetValue<bool>());
        Assert.NotEmpty(calibration["why"]!.GetValue<string>());
    }

    [Fact]
    public async Task A_rehearsal_that_is_not_there_is_a_problem_and_one_that_is_can_be_cancelled()
    {
        await using var watch = await StartAsync();
        await watch.AcceptAsync("leaf-1", Open());
        await FaultAsync(await watch.Http.GetAsync("/api/runs/leaf-1/rehearsals/none", Cancel), 404, "unknown-rehearsal");
        using var started = await watch.Http.PostAsync("/api/runs/leaf-1/rehearsals", null, Cancel);
        using var cancelled = await watch.Http.DeleteAsync(started.Headers.Location, Cancel);
        Assert.Equal(204, (int)cancelled.StatusCode);
    }

    [Fact]
    public async Task Reading_only_the_latest_steps_again_gives_the_tape_of_the_whole_run()
    {
        await using var watch = await StartAsync();
        var lines = LongRun();
        var whole = new RehearsalTape();
        var reader = new RecordReader();
        foreach (var line in lines) whole.Observe(reader.Read(System.Text.Encoding.UTF8.GetBytes(line)).Record!);
        Assert.Equal(RehearsalTape.MostSteps, whole.Steps.Count);

        await watch.AcceptAsync("leaf-1", Joined(lines));
        Assert.True(watch.TryHost("leaf-1", out var host));
        var (tape, _) = await host.ReadTapeAsync(watch.Journal, Cancel);
        Assert.Equal(60, tape.Settings.HistorySteps);
        Assert.Equal(whole.Steps.Select(s => (s.Step, s.Count, s.Settings.HistorySteps)).TakeLast(RehearsalTape.MostSteps - 1), tape.Steps.Select(s => (s.Step, s.Count, s.Settings.HistorySteps)).TakeLast(RehearsalTape.MostSteps - 1));
    }

    /// <summary>A hundred steps with vectors; the settings change once before the latest eighty steps and once within.</summary>
    private static List<string> LongRun()
    {
        var three = Convert.ToBase64String(new byte[24]);
        List<string> lines = [Open()];
        for (var step = 0; step < 100; step++)
        {
            if (step is 10 or 60)
                lines.Add($$$"""{"kind":"applied","seq":{{{lines.Count}}},"revision":{{{step}}},"fromStep":{{{step}}},"settings":{"method":"iqn-ils","historySteps":{{{step}}}}}""" + "\n");
            for (var k = 0; k < 3; k++) lines.Add(Iteration(lines.Count, step, k, more: $",\"vectors\":{{\"residual\":\"{three}\",\"output\":\"{three}\"}}"));
            lines.Add(Step(lines.Count, step, 3));
        }
        return lines;
    }
}
