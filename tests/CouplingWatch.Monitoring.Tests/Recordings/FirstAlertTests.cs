using CouplingWatch.Monitoring;

namespace CouplingWatch.Monitoring.Tests.Recordings;

/// <summary>Seq of the first alert of each check on the labelled recordings, as worked out independently from the written rules.</summary>
public sealed class FirstAlertTests
{
    [Theory]
    [InlineData("c06", "oscillation@6 divergence@7")]
    [InlineData("c07", "stall@87 noise-floor@102 capped@104 stale@111")]
    [InlineData("c08", "slow@9 capped@51")]
    [InlineData("c09", "slow@13 noise-floor@17 capped@26")]
    [InlineData("c10", "noise-floor@18 polluted@35 stall@38")]
    [InlineData("c11", "starved@9 slow@19")]
    [InlineData("c12", "stale@89")]
    [InlineData("c13", "slow@9 oscillation@9")]
    [InlineData("c14", "drift@155")]
    [InlineData("c15", "false-claim@56")]
    [InlineData("c16", "divergence@51")]
    [InlineData("c17", "silent@60")]
    [InlineData("c18", "capped@7")]
    [InlineData("c21", "divergence@9")]
    [InlineData("c22", "noise-floor@18 capped@23 polluted@29")]
    [InlineData("c24", "unequal-fields@126")]
    [InlineData("c27", "noise-floor@18 capped@21 polluted@36")]
    public void The_first_alerts_come_at_these_records(string name, string expected)
    {
        var first = Recording.Of(name).Judgement.Alerts.GroupBy(a => a.Check).ToDictionary(g => g.Key, g => g.Min(a => a.Seq));
        foreach (var entry in expected.Split(' '))
        {
            var (check, seq) = (entry[..entry.IndexOf('@', StringComparison.Ordinal)], long.Parse(entry[(entry.IndexOf('@', StringComparison.Ordinal) + 1)..], System.Globalization.CultureInfo.InvariantCulture));
            Assert.Equal(seq, first[check]);
        }
    }

    [Theory]
    [InlineData("c01")]
    [InlineData("c02")]
    [InlineData("c03")]
    [InlineData("c04")]
    [InlineData("c05")]
    [InlineData("c19")]
    [InlineData("c20")]
    [InlineData("c23")]
    [InlineData("c25")]
    [InlineData("c26")]
    [InlineData("c28")]
    public void Healthy_recordings_raise_nothing(string name) => Assert.Empty(Recording.Of(name).Judgement.Alerts);

    [Theory]
    [InlineData("c05", 102)]
    [InlineData("c07", 70)]
    [InlineData("c12", 66)]
    public void A_single_stale_step_is_a_note_in_the_log_only(string name, long seq)
    {
        var monitor = new RunMonitor(name);
        foreach (var record in Recording.Of(name).Records)
        {
            monitor.Observe(record, DateTimeOffset.UnixEpoch);
            if (monitor.State.Notes.Count == 0) continue;
            Assert.Equal(seq, record.Seq);
            Assert.Empty(monitor.Alerts);
            return;
        }
        Assert.Fail("no note");
    }
}
