using CouplingWatch.Benchmarks.Timing;
using CouplingWatch.Monitoring;
using CouplingWatch.Numerics.Trials;
using CouplingWatch.Records;

namespace CouplingWatch.Benchmarks.Monitor;

/// <summary>Judging whole records: level 0 over a long run, level 3 with 40 columns of 4,096 rows.</summary>
internal static class MonitorBenchmark
{
    private const int PerStep = 5;
    private static readonly DateTimeOffset Start = new(2026, 12, 1, 8, 0, 0, TimeSpan.Zero);

    internal static void Run(Table table)
    {
        var young = Level0(1_000, 1_000);
        var old = Level0(1_000_000, 1_000);
        table.Row("judge a level-0 iteration, among the first 2·10⁴ of a run", young.Seconds, "≤ 5 µs");
        table.Row("judge a level-0 iteration, after 10⁶ of them", old.Seconds, "among the first 2·10⁴", young.Seconds, old.Seconds / young.Seconds, "flat");
        Console.WriteLine($"| memory held by the monitor after 2·10⁴ and 10⁶ level-0 iterations | {young.Bytes / 1024} kB | {old.Bytes / 1024} kB | {(double)old.Bytes / young.Bytes:F2} | flat |");
        table.Row("judge a level-3 iteration, 4,096 rows, 36 to 40 columns", Level3(), "≤ 1 ms");
    }

    /// <summary>Mean seconds of an iteration (its share of the step record included) over the last ones, smallest of 20 batches.</summary>
    private static (double Seconds, long Bytes) Level0(long before, int batch)
    {
        long empty = GC.GetTotalMemory(true);
        var monitor = new RunMonitor("level-0");
        long seq = 0;
        monitor.Observe(Open(60, 0) with { Seq = seq++ }, Start);
        int step = 0;
        while (monitor.IterationCount < before) seq = Step(monitor, step++, seq);
        double best = double.PositiveInfinity;
        for (int round = 0; round < 20; round++)
        {
            StreamRecord[][] steps = [.. Enumerable.Range(0, batch / PerStep).Select(i => { StreamRecord[] s = Records(step + i, seq); seq += s.Length; return s; })];
            step += steps.Length;
            double start = ThreadClock.Seconds();
            foreach (StreamRecord[] records in steps)
                foreach (StreamRecord record in records) monitor.Observe(record, Start.AddSeconds(record.Seq));
            best = Math.Min(best, (ThreadClock.Seconds() - start) / batch);
        }
        long bytes = GC.GetTotalMemory(true) - empty;
        GC.KeepAlive(monitor);
        return (best, bytes);
    }

    private static long Step(RunMonitor monitor, int step, long seq)
    {
        StreamRecord[] records = Records(step, seq);
        foreach (StreamRecord record in records) monitor.Observe(record, Start.AddSeconds(record.Seq));
        return seq + records.Length;
    }

    private static StreamRecord[] Records(int step, long seq)
    {
        var records = new StreamRecord[PerStep + 1];
        for (int k = 0; k < PerStep; k++)
            records[k] = new IterationRecord { Seq = seq + k, Step = step, Iteration = k, Residuals = NamedValues.Of(("deflection", Math.Pow(10, -2.0 * k) * (1 + (0.1 * Math.Sin(step))))) };
        records[PerStep] = new StepRecord { Seq = seq + PerStep, Step = step, Iterations = PerStep, Outcome = StepOutcome.Converged };
        return records;
    }

    /// <summary>Median seconds of an iteration once nine steps of history stand: 36 reused columns and up to 4 live ones.</summary>
    private static double Level3()
    {
        const int rows = 4096, steps = 24;
        var monitor = new RunMonitor("level-3");
        var random = new SplitMix64(3);
        long seq = 0;
        monitor.Observe(Open(rows, 9) with { Seq = seq++ }, Start);
        var taken = new List<double>();
        for (int step = 0; step < steps; step++)
        {
            for (int k = 0; k < PerStep; k++)
            {
                double[] residual = Normal(ref random, rows, Math.Pow(10, -2.0 * k)), output = Normal(ref random, rows, 1);
                double norm = Math.Sqrt(residual.Sum(v => v * v)), magnitude = Math.Sqrt(output.Sum(v => v * v));
                var record = new IterationRecord
                {
                    Seq = seq++,
                    Step = step,
                    Iteration = k,
                    Residuals = NamedValues.Of(("deflection", norm)),
                    Magnitudes = NamedValues.Of(("deflection", magnitude)),
                    Vectors = new VectorPair(residual, output),
                };
                double start = ThreadClock.Seconds();
                monitor.Observe(record, Start.AddSeconds(seq));
                if (step >= 12) taken.Add(ThreadClock.Seconds() - start);
            }
            monitor.Observe(new StepRecord { Seq = seq++, Step = step, Iterations = PerStep, Outcome = StepOutcome.Converged }, Start.AddSeconds(seq));
        }
        taken.Sort();
        return taken[taken.Count / 2];
    }

    private static OpenRecord Open(int size, int history) => new()
    {
        Fields = [new FieldDeclaration { Name = "deflection", Size = size, Relative = 1e-7, Absolute = 1e-7 }],
        Settings = new CouplingSettings { Method = CouplingMethod.IqnIls, HistorySteps = history, FilterRule = FilterRule.OwnNorm, FilterThreshold = 1e-4, IterationCap = 40 },
    };

    private static double[] Normal(ref SplitMix64 random, int rows, double size)
    {
        var vector = new double[rows];
        for (int i = 0; i < rows; i++) vector[i] = size * random.NextNormal();
        return vector;
    }
}
