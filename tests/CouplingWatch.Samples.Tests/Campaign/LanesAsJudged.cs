using CoupledRuns;
using CouplingWatch.Monitoring;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using Demo.Campaign;

namespace CouplingWatch.Samples.Tests.Campaign;

/// <summary>Each lane of the demo, computed and judged by the monitor, at the pace it would have on the wall.</summary>
public class LanesAsJudged
{
    /// <summary>Records go straight into a monitor; the clock advances by the pace of the lane.</summary>
    private sealed class JudgingLink(DemoLane lane) : IRunLink
    {
        private readonly List<SettingsRevision> published = [];
        private long seq;

        public RunMonitor Monitor { get; } = new(lane.Run + "1");

        public double Seconds { get; private set; }

        public Dictionary<int, SettingsRevision> PublishAfterStep { get; } = [];

        /// <summary>Seconds after the start at which each check was first raised.</summary>
        public Dictionary<string, double> RaisedAt { get; } = [];

        public int NewestRevision => published.Count == 0 ? 0 : published[^1].Revision;

        public Task<SettingsRevision?> ReadSettingsAsync(CancellationToken stop) => Task.FromResult(published.LastOrDefault());

        public void Send(StreamRecord record)
        {
            if (record is IterationRecord) Seconds += 1 / lane.Pace;
            var at = DateTimeOffset.UnixEpoch.AddSeconds(Seconds);
            Monitor.Observe(record with { Seq = seq++, At = at }, at);
            foreach (var alert in Monitor.Alerts) RaisedAt.TryAdd(alert.Check, Seconds);
            if (record is StepRecord step && PublishAfterStep.TryGetValue(step.Step, out var revision)) published.Add(revision);
        }
    }

    private static async Task<(CoupledRun Run, JudgingLink Link)> Judge(string key, int steps, (int Step, CouplingSettings Settings)? publish = null)
    {
        var lane = DemoLanes.All.Single(l => l.Key == key);
        var link = new JudgingLink(lane);
        if (publish is { } p) link.PublishAfterStep[p.Step] = new SettingsRevision { Revision = 1, Settings = p.Settings };
        var (problem, plan) = lane.Make();
        plan = plan with { Steps = steps };
        link.Send(CoupledRun.Open(problem, plan));
        var run = new CoupledRun(problem, plan, link, TimeProvider.System);
        await run.RunAsync(TestContext.Current.CancellationToken);
        return (run, link);
    }

    [Theory]
    [InlineData("healthy")]
    [InlineData("plate")]
    public async Task A_healthy_lane_raises_no_alert_in_its_first_steps(string key)
    {
        var (_, link) = await Judge(key, 150);
        Assert.Empty(link.Monitor.Alerts);
    }

    [Fact]
    public async Task The_starved_lane_is_found_out_within_seconds_and_recovers_when_the_advice_is_published()
    {
        var (run, link) = await Judge("starved", 80, (39, new CouplingSettings { FilterRule = FilterRule.OwnNorm, FilterThreshold = 1e-4 }));
        Assert.InRange(link.RaisedAt["starved"], 0, 20);
        Assert.Contains(link.Monitor.AdviceGiven, a => a.Setting == "filterThreshold" && a.Move == "down" && a.Adjustable);
        Assert.InRange(run.Counts.Skip(5).Take(35).Average(), 8, 16);
        Assert.InRange(run.Counts.Skip(45).Average(), 2.5, 4.6);
        Assert.DoesNotContain(link.Monitor.Alerts, a => a.Check == "starved" && a.State is AlertState.Unacknowledged);
        Assert.True(link.Seconds < 180, $"{link.Seconds} s");
    }

    [Fact]
    public async Task The_diverging_lane_runs_well_for_a_minute_and_then_diverges_within_three()
    {
        var (_, link) = await Judge("diverging", 400);
        Assert.InRange(link.RaisedAt["divergence"], 30, 180);
        Assert.All(link.RaisedAt.Values, seconds => Assert.True(seconds > 30));
        Assert.Equal("diverged", link.Monitor.Summary().State);
    }
}
