using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Robustness;

/// <summary>Valid but odd streams from a seed: any record after any other, missing members, numbers of every size, steps without verdicts, attempts, regroupings, events between.</summary>
internal sealed class OddStream
{
    private static readonly string[] FieldNames = ["water-level", "plate-heat", "leaf-load"];
    private readonly Random random;
    private readonly List<object> items = [];
    private readonly FieldDeclaration[] fields;
    private readonly bool grouped;
    private readonly bool steady;
    private long seq;
    private DateTimeOffset clock = new(2026, 12, 1, 8, 0, 0, TimeSpan.Zero);

    private OddStream(int seed)
    {
        random = new Random(seed);
        grouped = random.Next(5) == 0;
        steady = random.Next(5) == 0;
        fields = [.. FieldNames.Take(random.Next(1, 4)).Select(Field)];
    }

    /// <summary>Records and server events, in order.</summary>
    public static IReadOnlyList<object> Of(int seed, int records = 160)
    {
        var stream = new OddStream(seed);
        if (stream.random.Next(12) > 0) stream.Add(stream.Open());
        int step = 0, attempt = 0, iteration = 0;
        while (stream.items.Count < records) stream.Next(ref step, ref attempt, ref iteration);
        if (stream.random.Next(3) == 0) stream.Add(new CloseRecord { Outcome = stream.Any<CloseOutcome>() });
        return stream.items;
    }

    private void Next(ref int step, ref int attempt, ref int iteration)
    {
        switch (random.Next(40))
        {
            case < 28:
                Add(Iteration(step, attempt, iteration++));
                break;
            case < 32:
                Add(new StepRecord { Step = step, Attempt = Maybe(attempt), Iterations = Maybe(iteration), Outcome = Any<StepOutcome>(), TimeStep = Maybe(0.01 * Math.Pow(2, random.Next(-3, 3))) });
                if (random.Next(3) == 0) attempt++;
                else if (!steady) (step, attempt) = (step + random.Next(0, 3), 0);
                iteration = random.Next(6) == 0 ? 1 : 0;
                break;
            case 32:
                if (!steady) step = Math.Max(0, step + random.Next(-2, 3));
                iteration = 0;
                break;
            case 33:
                Add(new AppliedRecord { Revision = random.Next(1, 4), FromStep = Maybe(step + random.Next(-1, 3)), FromIteration = Maybe(iteration), Settings = random.Next(3) == 0 ? null : Settings(), Refused = "no" });
                break;
            case 34:
                Add(new ResizeRecord { Fields = fields, BasisMapped = random.Next(2) == 0, Reordered = random.Next(2) == 0 });
                break;
            case 35:
                if (random.Next(2) == 0) Add(new SkippedRecord { Iterations = Maybe(3) });
                else seq += random.Next(0, 3);
                break;
            case 36:
                Add(random.Next(3) switch
                {
                    0 => new CheckpointRecord { Step = step, Seconds = 3 },
                    1 => new UnknownRecord("strange"),
                    _ => new BeatRecord { In = "water", InsideSeconds = 5000 },
                });
                break;
            case 37: clock = clock.AddSeconds(random.Next(0, 5000)); break;
            default: items.Add(Event()); break;
        }
    }

    private void Add(StreamRecord record)
    {
        clock = clock.AddSeconds(random.NextDouble() * 4);
        items.Add(record with { Seq = seq++, At = Maybe(clock) });
    }

    private ServerEvent Event() => random.Next(8) switch
    {
        0 => new SilentEvent(700, 60) { At = clock },
        1 => new BackEvent(700) { At = clock },
        2 => new HangEvent("water", 9000, 600) { At = clock },
        3 => new PublishedEvent(random.Next(1, 4), Settings(), random.Next(2) == 0 ? ["dropHistory"] : [], "operator", null) { At = clock },
        4 => new PickedUpEvent(random.Next(1, 4)) { At = clock },
        5 => new AcknowledgedEvent($"odd~divergence~{random.Next(20)}", "operator") { At = clock },
        6 => new ShelvedEvent($"odd~stall~{random.Next(40)}", "operator", clock.AddSeconds(30), "known") { At = clock },
        _ => new DismissedEvent($"odd~advice~relaxation~{random.Next(40)}", "operator", "no") { At = clock },
    };

    private OpenRecord Open() => new()
    {
        Fields = fields,
        Scheme = Any<CouplingScheme>(),
        Stepping = steady ? Stepping.Steady : Stepping.Transient,
        Solvers = [new SolverDeclaration("water", Maybe(1e-6)), new SolverDeclaration("plate")],
        Settings = Settings(),
        Adjustable = random.Next(2) == 0 ? new AdjustableSettings() : new AdjustableSettings { Ranges = new Dictionary<string, NumberRange> { ["relaxation"] = new(0.01, 1) }, Commands = ["dropHistory"] },
        TimeStep = Maybe(0.01),
        EndTime = Maybe(4.0),
        BeatSeconds = Maybe(30.0),
        Continues = random.Next(6) == 0 ? new Continuation("odd-0", 40, random.Next(2) == 0 ? "kept" : null) : null,
    };

    private CouplingSettings Settings() => new()
    {
        Method = random.Next(6) == 0 ? null : Any<CouplingMethod>(),
        Relaxation = Maybe(random.NextDouble()),
        HistorySteps = Maybe(random.Next(0, 9)),
        FilterRule = random.Next(5) == 0 ? null : Any<FilterRule>(),
        FilterThreshold = Maybe(Math.Pow(10, -random.Next(1, 13))),
        IterationCap = Maybe(random.Next(1, 50)),
        PredictorOrder = Maybe(1),
    };

    private FieldDeclaration Field(string name) => new()
    {
        Name = name,
        Unit = random.Next(3) == 0 ? "K" : random.Next(3) == 0 ? null : "m",
        Size = random.Next(3) == 0 ? null : 4,
        Role = random.Next(5) == 0 ? FieldRole.Checked : FieldRole.Unknown,
        Group = grouped ? (name.Length % 2 == 0 ? "a" : "b") : null,
        Weight = random.Next(3) == 0 ? random.NextDouble() * 1000 : random.Next(2) == 0 ? 1 : null,
        Norm = random.Next(3) > 0 ? FieldNorm.Euclidean : Any<FieldNorm>(),
        RelativeTo = Any<ToleranceReference>(),
        Relative = Maybe(1e-6),
        Absolute = Maybe(1e-10),
    };

    private IterationRecord Iteration(int step, int attempt, int iteration)
    {
        var names = fields.Select(f => f.Name).Where(_ => random.Next(20) > 0).DefaultIfEmpty(fields[0].Name).ToArray();
        NamedValues Values() => new(names, [.. names.Select(_ => Number())]);
        var length = random.Next(10) == 0 ? random.Next(1, 5) : fields.Count(f => f.Role == FieldRole.Unknown) * 4;
        var data = random.Next(4) == 0 ? null : new GroupData(random.Next(2) == 0 ? Vectors(length) : null, random.Next(4) == 0 ? Sketch() : null, random.Next(2) == 0 ? Report(step, iteration) : null);
        return new IterationRecord
        {
            Step = step,
            Iteration = iteration,
            Attempt = random.Next(4) == 0 ? attempt : null,
            Residuals = Values(),
            Magnitudes = random.Next(3) == 0 ? null : Values(),
            Targets = random.Next(4) == 0 ? Values() : null,
            Met = random.Next(8) == 0 ? new NamedValues(names, [.. names.Select(_ => (double)random.Next(2))]) : null,
            Seconds = random.Next(2) == 0 ? NamedValues.Of(("water", Number()), ("plate", 0.1)) : null,
            PassSeconds = Maybe(Number()),
            Relaxation = random.Next(4) == 0 ? Number() : null,
            TimeStep = Maybe(0.01 * Math.Pow(2, random.Next(-2, 3))),
            Time = Maybe(0.01 * step),
            Vectors = grouped ? null : data?.Vectors,
            Sketch = grouped ? null : data?.Sketch,
            Basis = grouped ? null : data?.Basis,
            Surrogate = random.Next(9) == 0 ? new SurrogateReport(3, 0.1, Number()) : null,
            Groups = grouped && data is not null ? new Dictionary<string, GroupData> { ["a"] = data, ["b"] = data } : null,
        };
    }

    private VectorPair Vectors(int length) => new(Numbers(Math.Max(1, length)), Numbers(random.Next(30) == 0 ? 2 : Math.Max(1, length)));

    private SketchPair Sketch() => new(16, 7, Numbers(16), Numbers(16));

    private BasisReport Report(int step, int iteration)
    {
        var births = Enumerable.Range(0, random.Next(0, 7)).Select(_ => new ColumnBirth(Math.Max(0, step - random.Next(3)), random.Next(0, iteration + 2))).ToArray();
        var split = random.Next(0, births.Length + 1);
        var kept = births[..split];
        var entries = random.Next(5) == 0 ? random.Next(0, 9) : split * (split + 1) / 2;
        return new BasisReport(kept, births[split..], random.Next(2) == 0 ? Numbers(entries) : null, random.Next(2) == 0 ? Numbers(random.Next(5) == 0 ? 1 : split) : null);
    }

    private double[] Numbers(int n)
    {
        var wild = random.Next(6) == 0;
        return [.. Enumerable.Range(0, n).Select(_ => wild ? Number() : random.NextDouble() - 0.5)];
    }

    private double Number() => random.Next(40) switch
    {
        0 => double.NaN,
        1 => double.PositiveInfinity,
        2 => 0,
        3 => 1e-310,
        4 => 1e300,
        5 => -random.NextDouble(),
        _ => Math.Pow(10, random.NextDouble() * 12 - 9),
    };

    private T Any<T>()
        where T : struct, Enum => random.GetItems(Enum.GetValues<T>(), 1)[0];

    private T? Maybe<T>(T value)
        where T : struct => random.Next(3) == 0 ? null : value;
}
