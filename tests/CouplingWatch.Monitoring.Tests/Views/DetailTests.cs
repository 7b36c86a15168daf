using System.Text.Json;
using CouplingWatch.Recordings;
using CouplingWatch.Testing;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Views;

public class DetailTests
{
    public static TheoryData<string> Recordings => [.. ReferenceData.Recordings().Select(p => Path.GetFileName(p)!)];

    [Theory]
    [MemberData(nameof(Recordings))]
    public async Task Every_recording_can_be_shown_while_it_comes_in(string name)
    {
        var monitor = new RunMonitor("shown");
        var n = 0;
        await foreach (var item in RecordingFile.ReadAsync(ReferenceData.Path("recordings", name), cancel: TestContext.Current.CancellationToken))
        {
            if (item.Record is null) continue;
            monitor.Observe(item.Record, item.Received);
            if (n++ % 29 != 0) continue;
            var detail = monitor.Detail();
            Assert.NotEmpty(JsonSerializer.Serialize(detail, WireJson.Options));
            foreach (var bar in detail.Split) Assert.Equal(1, bar.Live + bar.History + bar.Surrogate + bar.Uncovered, 6);
        }
        Assert.Equal(monitor.StepCount, monitor.Steps(null, null, int.MaxValue).Sum(b => b.ToStep - b.FromStep + 1));
    }

    [Fact]
    public async Task The_ledger_of_a_starved_basis_shows_what_another_threshold_would_keep()
    {
        var monitor = await Observed("c11-starved-basis.ndjson", 228);
        var ledger = monitor.Basis();
        Assert.NotNull(ledger);
        Assert.True(ledger.Kept < ledger.Columns.Count / 3, $"{ledger.Kept} of {ledger.Columns.Count}");
        var other = monitor.Basis(threshold: 1e-7);
        Assert.True(other!.Kept > ledger.Kept);
        Assert.Equal(ledger.WhatIf.Single(w => w.InForce).Kept, ledger.Kept);
    }

    [Fact]
    public async Task The_ledger_reproduces_the_kept_columns_of_a_steady_leaf()
    {
        // Figures found by an independent implementation on the same recording: step 20, iteration 1, 12 columns.
        var monitor = await Observed("c01-steady-leaf.ndjson", 110);
        var basis = monitor.Basis(20, 1);
        Assert.NotNull(basis);
        Assert.Equal(12, basis.Columns.Count);
        Assert.Equal(11, basis.Kept);
        Assert.Equal(7.026e4, basis.ConditionUnit!.Value, 7.026e4 * 1e-3);
        Assert.Equal(8.111e-3, basis.Uncovered!.Value, 8.111e-3 * 1e-3);
        var stricter = monitor.Basis(20, 1, threshold: 1e-1)!;
        Assert.Equal((6, 41.44), (stricter.Kept, Math.Round(stricter.ConditionUnit!.Value, 2)));
    }

    private static async Task<RunMonitor> Observed(string name, int records)
    {
        var monitor = new RunMonitor("observed");
        await foreach (var item in RecordingFile.ReadAsync(ReferenceData.Path("recordings", name), cancel: TestContext.Current.CancellationToken))
        {
            if (item.Record is null) continue;
            monitor.Observe(item.Record, item.Received);
            if (--records == 0) break;
        }
        return monitor;
    }
}
