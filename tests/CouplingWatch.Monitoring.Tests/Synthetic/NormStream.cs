using CouplingWatch.Monitoring;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Tests.Synthetic;

/// <summary>A stream written by hand: norms of one field of magnitude 1, one record a call.</summary>
internal sealed class NormStream
{
    private readonly List<StreamRecord> records = [];
    private DateTimeOffset clock = new(2026, 12, 1, 8, 0, 0, TimeSpan.Zero);

    public NormStream(CouplingSettings? settings = null, double tolerance = 1e-6, Func<OpenRecord, OpenRecord>? change = null)
    {
        var open = new OpenRecord
        {
            Fields = [new FieldDeclaration { Name = "level", Unit = "m", Relative = tolerance }],
            Settings = settings ?? new CouplingSettings { Method = CouplingMethod.IqnIls, IterationCap = 40, HistorySteps = 4 },
        };
        Add(change?.Invoke(open) ?? open);
    }

    public IReadOnlyList<StreamRecord> Records => records;

    public long NextSeq => records.Count;

    /// <summary>Iterations 0, 1, … of a step with these norms; magnitude 1.</summary>
    public NormStream Iterations(int step, IEnumerable<double> norms, int? attempt = null, int from = 0, double secondsEach = 2, double? timeStep = null)
    {
        foreach (var norm in norms)
        {
            clock = clock.AddSeconds(secondsEach);
            Add(new IterationRecord
            {
                Step = step,
                Iteration = from++,
                Attempt = attempt,
                TimeStep = timeStep,
                Residuals = NamedValues.Of(("level", norm)),
                Magnitudes = NamedValues.Of(("level", 1)),
            });
        }
        return this;
    }

    public NormStream Verdict(int step, StepOutcome outcome = StepOutcome.Converged, int? attempt = null) => Add(new StepRecord { Step = step, Outcome = outcome, Attempt = attempt });

    /// <summary>A healthy step of so many iterations, with its verdict.</summary>
    public NormStream Healthy(int step, int iterations = 4, double? timeStep = null) =>
        Iterations(step, Enumerable.Range(0, iterations).Select(k => Math.Pow(10, -7.0 * k / (iterations - 1))), timeStep: timeStep).Verdict(step);

    public NormStream Wait(double seconds)
    {
        clock = clock.AddSeconds(seconds);
        return this;
    }

    public NormStream Add(StreamRecord record)
    {
        records.Add(record with { Seq = records.Count, At = record is StepRecord ? null : clock });
        return this;
    }

    public RunMonitor Judge(bool end = false)
    {
        var monitor = new RunMonitor("hand");
        foreach (var record in records) monitor.Observe(record, clock);
        if (end) monitor.EndOfRecording();
        return monitor;
    }

    /// <summary>Norms that fall by a factor an iteration.</summary>
    public static IEnumerable<double> Falling(double first, double factor, int n) => Enumerable.Range(0, n).Select(k => first * Math.Pow(factor, k));
}
