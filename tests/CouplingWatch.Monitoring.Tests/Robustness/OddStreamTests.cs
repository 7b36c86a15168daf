using System.Text.Json;
using CouplingWatch.Monitoring;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using CsCheck;

namespace CouplingWatch.Monitoring.Tests.Robustness;

/// <summary>No valid record makes the monitor throw, whatever came before it; and asking changes nothing.</summary>
public sealed class OddStreamTests
{
    private static readonly DateTimeOffset Now = new(2026, 12, 2, 8, 0, 0, TimeSpan.Zero);

    [Fact]
    public void Valid_records_and_events_never_throw_and_asking_never_does()
    {
        Gen.Int[0, int.MaxValue - 1].Sample(seed =>
        {
            var monitor = new RunMonitor("odd");
            var n = 0;
            foreach (var item in OddStream.Of(seed))
            {
                Feed(monitor, item, n);
                if (++n % 7 == 0) Ask(monitor);
            }
            monitor.EndOfRecording();
            Ask(monitor);
        }, iter: 300);
    }

    [Fact]
    public void The_same_records_give_the_same_judgement_however_often_somebody_asks()
    {
        Gen.Int[0, int.MaxValue - 1].Sample(seed =>
        {
            var quiet = new RunMonitor("odd");
            var asked = new RunMonitor("odd");
            var random = new Random(seed);
            var n = 0;
            foreach (var item in OddStream.Of(seed))
            {
                Feed(quiet, item, n);
                Feed(asked, item, n++);
                while (random.Next(3) == 0) Ask(asked);
            }
            quiet.EndOfRecording();
            asked.EndOfRecording();
            return Written(quiet) == Written(asked);
        }, iter: 150);
    }

    [Fact]
    public void Alerts_are_open_once_a_check_and_close_after_they_opened()
    {
        Gen.Int[0, int.MaxValue - 1].Sample(seed =>
        {
            var monitor = new RunMonitor("odd");
            var n = 0;
            foreach (var item in OddStream.Of(seed))
            {
                Feed(monitor, item, n++);
                var standing = monitor.Alerts.Where(a => a.ClosedSeq is null).Select(a => a.Check).ToArray();
                Assert.Equal(standing.Length, standing.Distinct().Count());
            }
            Assert.All(monitor.Alerts, a => Assert.True(a.LastSeq >= a.Seq && (a.ClosedSeq is null || a.ClosedSeq >= a.LastSeq)));
            Assert.Equal(monitor.Alerts.Select(a => a.Id).Distinct().Count(), monitor.Alerts.Count);
            Assert.Equal(monitor.Alerts.OrderBy(a => a.Seq).Select(a => a.Seq), monitor.Alerts.Select(a => a.Seq));
        }, iter: 100);
    }

    [Fact]
    public void The_odd_streams_reach_nearly_every_check()
    {
        HashSet<string> raised = [];
        var finite = true;
        for (var seed = 0; seed < 200; seed++)
        {
            var monitor = new RunMonitor("odd");
            var n = 0;
            foreach (var item in OddStream.Of(seed)) Feed(monitor, item, n++);
            monitor.EndOfRecording();
            foreach (var alert in monitor.Alerts)
            {
                raised.Add(alert.Check);
                finite &= !alert.Evidence.ToJsonString(WireJson.Options).Contains("NaN", StringComparison.Ordinal);
            }
        }
        Assert.True(finite, "evidence holds a number that is none");
        Assert.Superset(new HashSet<string> { "divergence", "false-claim", "silent", "hang", "starved", "stall", "unconverged-run", "capped" }, raised);
    }

    internal static void Feed(RunMonitor monitor, object item, int n)
    {
        if (item is StreamRecord record) monitor.Observe(record, Now.AddSeconds(n));
        else monitor.Observe((ServerEvent)item);
    }

    private static void Ask(RunMonitor monitor)
    {
        _ = monitor.Alerts;
        _ = monitor.Advice;
        _ = monitor.AdviceGiven;
        _ = monitor.NotJudged;
        _ = monitor.Verdict;
        _ = monitor.Revisions;
        _ = monitor.Basis();
        _ = monitor.Basis(rule: FilterRule.PivotRatio, threshold: 1e-3);
        _ = monitor.Spectrum();
        _ = monitor.Summary();
        _ = monitor.Steps(null, null, 50);
        _ = monitor.Iterations(1);
        _ = monitor.SilenceLimitSeconds;
        _ = Written(monitor);
    }

    /// <summary>The judgement as bytes would say it.</summary>
    internal static string Written(RunMonitor monitor) =>
        JsonSerializer.Serialize(new { monitor.Alerts, monitor.AdviceGiven, monitor.Advice, monitor.NotJudged, monitor.Verdict, monitor.Revisions, basis = monitor.Basis(), spectrum = monitor.Spectrum(), detail = monitor.Detail() }, WireJson.Options);
}
