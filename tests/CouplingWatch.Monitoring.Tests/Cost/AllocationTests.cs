using CouplingWatch.Monitoring;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Tests.Cost;

/// <summary>Tests that measure the memory of the whole process: no other test runs beside them.</summary>
[CollectionDefinition(Name, DisableParallelization = true)]
public sealed class MeasuredAlone
{
    public const string Name = "measured alone";
}

/// <summary>What a record costs in memory: nothing at level 0 once the windows are full, and no more late in a run than early.</summary>
[Collection(MeasuredAlone.Name)]
public sealed class AllocationTests
{
    private static readonly DateTimeOffset Start = new(2026, 12, 1, 8, 0, 0, TimeSpan.Zero);

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    public void A_record_allocates_nothing_in_the_steady_state(int level)
    {
        var monitor = Opened(Stepping.Transient);
        var records = Steps(0, 400, level);
        var warm = records.Count / 2;
        for (var i = 0; i < warm; i++) monitor.Observe(records[i], Start);
        var worst = 0L;
        var total = 0L;
        for (var i = warm; i < records.Count; i++)
        {
            if (records[i] is not IterationRecord) continue;
            var before = GC.GetAllocatedBytesForCurrentThread();
            monitor.Observe(records[i], Start);
            var bytes = GC.GetAllocatedBytesForCurrentThread() - before;
            worst = Math.Max(worst, bytes);
            total += bytes;
            if (i + 1 < records.Count && records[i + 1] is StepRecord) monitor.Observe(records[i + 1], Start);
        }
        Assert.Equal((0L, 0L), (worst, total));
    }

    [Fact]
    public void A_steady_run_of_a_hundred_thousand_iterations_keeps_no_more_than_one_of_a_thousand()
    {
        var monitor = Opened(Stepping.Steady);
        long Feed(int from, int to)
        {
            var before = GC.GetAllocatedBytesForCurrentThread();
            var made = 0L;
            for (var k = from; k < to; k++)
            {
                var start = GC.GetAllocatedBytesForCurrentThread();
                var record = Iteration(0, k, Math.Pow(10, -2 - 2e-5 * k + 0.3 * Math.Sin(k)), 1 + k, 0);
                made += GC.GetAllocatedBytesForCurrentThread() - start;
                monitor.Observe(record, Start);
            }
            return GC.GetAllocatedBytesForCurrentThread() - before - made;
        }
        Feed(0, 1000);
        var early = Feed(1000, 11_000) / 10.0;
        var late = Feed(90_000, 100_000) / 10.0;
        Assert.True(late <= early * 1.1 + 1000, $"{early:0} bytes a thousand iterations early, {late:0} late");
    }

    [Fact]
    public void A_long_run_holds_no_more_than_a_shorter_one_once_its_books_are_full()
    {
        var shortRun = Held(11_000);
        var longRun = Held(22_000);
        Assert.True(longRun < shortRun * 1.1 + 100_000, $"{shortRun:#,0} bytes after 11,000 steps, {longRun:#,0} after 22,000");
    }

    private static long Held(int steps)
    {
        var before = GC.GetTotalMemory(true);
        var monitor = Opened(Stepping.Transient);
        long seq = 1;
        for (var step = 0; step < steps; step++)
        {
            for (var k = 0; k < 4; k++) monitor.Observe(Iteration(step, k, Math.Pow(10, -2 - 2 * k), seq++, 1), Start);
            monitor.Observe(new StepRecord { Seq = seq++, Step = step, Outcome = step % 10 == 7 ? StepOutcome.Capped : StepOutcome.Converged, Iterations = 4 }, Start);
        }
        var held = GC.GetTotalMemory(true) - before;
        GC.KeepAlive(monitor);
        return held;
    }

    private static RunMonitor Opened(Stepping stepping)
    {
        var monitor = new RunMonitor("cost");
        monitor.Observe(new OpenRecord
        {
            Seq = 0,
            Stepping = stepping,
            Fields = [new FieldDeclaration { Name = "a", Relative = 1e-7 }, new FieldDeclaration { Name = "b", Relative = 1e-7 }],
            Settings = new CouplingSettings { Method = CouplingMethod.IqnIls, IterationCap = 40, HistorySteps = 4 },
        }, Start);
        return monitor;
    }

    private static List<StreamRecord> Steps(int from, int count, int level)
    {
        List<StreamRecord> records = [];
        long seq = 1;
        for (var step = from; step < from + count; step++)
        {
            var n = 4 + step % 2;
            for (var k = 0; k < n; k++) records.Add(Iteration(step, k, Math.Pow(10, -2 - 2 * k), seq++, level));
            records.Add(new StepRecord { Seq = seq++, Step = step, Outcome = StepOutcome.Converged, Iterations = n });
        }
        return records;
    }

    private static IterationRecord Iteration(int step, int iteration, double norm, long seq, int level) => new()
    {
        Seq = seq,
        At = Start.AddSeconds(2 * seq),
        Step = step,
        Iteration = iteration,
        Residuals = NamedValues.Of(("a", norm), ("b", norm * 0.9)),
        Magnitudes = level >= 1 ? NamedValues.Of(("a", 1), ("b", 1)) : null,
        Seconds = level >= 1 ? NamedValues.Of(("water", 1.5), ("leaf", 0.1)) : null,
    };
}
