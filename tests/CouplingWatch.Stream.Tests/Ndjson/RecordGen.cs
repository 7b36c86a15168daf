using System.Text.Json.Nodes;
using CouplingWatch.Records;
using CsCheck;

namespace CouplingWatch.StreamTests.Ndjson;

/// <summary>Random records of every kind: names with letters of many scripts, numbers of every size, NaN and infinities, vectors and bases of matching lengths.</summary>
internal static class RecordGen
{
    private static readonly Gen<double> Number = Gen.Frequency((8, Gen.Double), (1, Gen.OneOf(double.NaN, double.PositiveInfinity, double.NegativeInfinity, 0, -0.0, double.Epsilon, double.MaxValue)));
    private static readonly Gen<double> Norm = Gen.Frequency((8, Gen.Double[0, 1e30]), (1, Gen.OneOf(double.NaN, double.PositiveInfinity, 0)));
    private static readonly Gen<double> Positive = Gen.Double[0, 1e6];
    private static readonly Gen<string> Name = Gen.OneOf("deflection", "wall-temperature", "p", "Δp \"q\"", "水", "a\\b", "tab\tin");
    private static readonly Gen<string> Text = Gen.String[Gen.OneOf(Gen.Char['a', 'z'], Gen.OneOf('é', '水', '"', '\\', '\n', '\u0001', ' ', '{', '/')), 0, 12];
    private static readonly Gen<int> Count = Gen.Int[0, 100000];
    private static readonly Gen<DateTimeOffset> Time =
        Gen.Select(Gen.Long[0, 3_000_000_000_000], Gen.Int[-12, 12]).Select((ms, h) => DateTimeOffset.FromUnixTimeMilliseconds(ms).ToOffset(TimeSpan.FromHours(h)));

    private static Gen<T?> Maybe<T>(Gen<T> gen)
        where T : struct => Gen.Frequency((1, Gen.Const((T?)null)), (2, gen.Select(v => (T?)v)));

    private static Gen<T?> MaybeRef<T>(Gen<T> gen)
        where T : class => Gen.Frequency((1, Gen.Const((T?)null)), (2, gen.Select(v => (T?)v)));

    private static Gen<T> AnyOf<T>()
        where T : struct, Enum => Gen.OneOf(Enum.GetValues<T>());

    private static Gen<NamedValues> Named(Gen<double> value) =>
        Gen.Select(Name.Array[1, 5], value.Array[5]).Select((names, values) => new NamedValues([.. names.Distinct()], values[..names.Distinct().Count()]));

    private static readonly Gen<VectorPair> Vectors =
        Gen.Int[1, 20].SelectMany(n => Gen.Select(Number.Array[n], Number.Array[n])).Select((r, o) => new VectorPair(r, o));

    private static readonly Gen<SketchPair> Sketch =
        Gen.Int[1, 4].SelectMany(n => Gen.Select(Number.Array[8 * n], Number.Array[8 * n], Gen.Long[0, (1L << 53) - 1], Maybe(Gen.Int[1, 1 << 30])))
            .Select((r, o, seed, full) => new SketchPair(r.Length, seed, r, o, full));

    private static readonly Gen<ColumnBirth> Birth = Gen.Select(Count, Gen.Int[0, 60], Gen.Int[0, 2]).Select((s, k, a) => new ColumnBirth(s, k, a));

    private static readonly Gen<BasisReport> Basis = Gen.Int[0, 6]
        .SelectMany(n => Gen.Select(Birth.Array[n], Birth.Array[0, 3], MaybeRef(Number.Array[n * (n + 1) / 2]), MaybeRef(Number.Array[n])))
        .Select((columns, left, r, c) => new BasisReport(columns, left, r, c));

    private static readonly Gen<GroupData> Group = Gen.Select(MaybeRef(Vectors), MaybeRef(Sketch), MaybeRef(Basis)).Select((v, s, b) => new GroupData(v, s, b));

    private static readonly Gen<IReadOnlyList<WorstResidual>> Worst =
        Gen.Select(Name.Array[0, 3], Count, Number, MaybeRef(Number.Array[3]))
            .Select((names, i, v, at) => (IReadOnlyList<WorstResidual>)[.. names.Distinct().Select(n => new WorstResidual(n, i, v, at))]);

    private static readonly Gen<CouplingSettings> Settings =
        Gen.Select(Maybe(AnyOf<CouplingMethod>()), Maybe(Number), Maybe(Gen.Int[0, 50]), Maybe(AnyOf<FilterRule>()), Maybe(Positive), Maybe(Gen.Int[1, 100]), Gen.Select(Maybe(Positive), MaybeRef(Text), Gen.Bool))
            .Select((method, relaxation, history, rule, threshold, cap, rest) => new CouplingSettings
            {
                Method = method,
                Relaxation = relaxation,
                HistorySteps = history,
                FilterRule = rule,
                FilterThreshold = threshold,
                IterationCap = cap,
                PredictorOrder = history % 3,
                Tolerance = rest.Item1,
                Surrogate = rest.Item2,
                Own = rest.Item3 ? new JsonObject { ["damping"] = 0.25, ["list"] = new JsonArray(1, "two") } : null,
            });

    private static readonly Gen<FieldDeclaration> Field =
        Gen.Select(MaybeRef(Text), Maybe(Gen.Int[1, 1000]), AnyOf<FieldRole>(), MaybeRef(Name), Maybe(Positive), AnyOf<FieldNorm>(), AnyOf<ToleranceReference>())
            .Select((unit, size, role, group, weight, norm, reference) => new FieldDeclaration
            {
                Name = "",
                Unit = unit,
                Size = size,
                Role = role,
                Group = group,
                From = group,
                Weight = weight,
                Norm = norm,
                RelativeTo = reference,
                Relative = weight,
                Absolute = weight / 2,
            });

    private static readonly Gen<IReadOnlyList<FieldDeclaration>> Fields =
        Gen.Select(Name.Array[1, 4], Field.Array[4]).Select((names, fields) => (IReadOnlyList<FieldDeclaration>)[.. names.Distinct().Select((n, i) => fields[i] with { Name = n })]);

    private static readonly Gen<AdjustableSettings> Adjustable =
        Gen.Select(Gen.Bool, Gen.Bool, Gen.Bool).Select((ranges, choices, commands) => new AdjustableSettings
        {
            Ranges = ranges ? new Dictionary<string, NumberRange> { ["relaxation"] = new(0.01, 1), ["historySteps"] = new(0, 40) } : new Dictionary<string, NumberRange>(),
            Choices = choices ? new Dictionary<string, IReadOnlyList<string>> { ["filterRule"] = ["own-norm", "pivot-ratio"], ["empty"] = [] } : new Dictionary<string, IReadOnlyList<string>>(),
            Commands = commands ? ["dropHistory", "stop"] : [],
        });

    private static readonly Gen<StreamRecord> Open =
        Gen.Select(MaybeRef(Text), AnyOf<CouplingScheme>(), AnyOf<Stepping>(), Fields, Settings, Adjustable, Gen.Select(Maybe(Positive), Maybe(Time), MaybeRef(Text)))
            .Select((text, scheme, stepping, fields, settings, adjustable, rest) => (StreamRecord)new OpenRecord
            {
                Instance = text,
                Campaign = rest.Item3,
                Title = text,
                Scheme = scheme,
                Stepping = stepping,
                Fields = fields,
                Settings = settings,
                Adjustable = adjustable,
                Solvers = text is null ? [] : [new SolverDeclaration("water", rest.Item1, null), new SolverDeclaration("leaf")],
                TimeStep = rest.Item1,
                EndTime = rest.Item1,
                AllocationEndsAt = rest.Item2,
                Nodes = rest.Item1,
                BeatSeconds = rest.Item1,
                Continues = text is null ? null : new Continuation("leaf80-1", 400, rest.Item3),
                Provenance = text is null ? new Dictionary<string, string>() : new Dictionary<string, string> { ["mesh"] = text },
                Labels = text is null ? new Dictionary<string, string>() : new Dictionary<string, string> { ["thickness_mm"] = "80" },
            });

    private static readonly Gen<StreamRecord> Iteration =
        Gen.Select(Named(Norm), MaybeRef(Named(Norm)), MaybeRef(Named(Number)), Maybe(Number), Worst, Group, Gen.Select(Count, Count, Maybe(Gen.Int[0, 3]), Gen.Bool, MaybeRef(Group), MaybeRef(Named(Gen.OneOf(0.0, 1.0)))))
            .Select((residuals, magnitudes, seconds, number, worst, data, rest) => (StreamRecord)new IterationRecord
            {
                Step = rest.Item1,
                Iteration = rest.Item2,
                Attempt = rest.Item3,
                Residuals = residuals,
                Magnitudes = magnitudes,
                Targets = magnitudes,
                Met = rest.Item6,
                Seconds = seconds,
                Time = number,
                TimeStep = number,
                PassSeconds = number,
                Relaxation = number,
                Worst = worst,
                Vectors = data.Vectors,
                Sketch = data.Sketch,
                Basis = data.Basis,
                Surrogate = rest.Item4 ? new SurrogateReport(rest.Item1, number, null) : null,
                Groups = rest.Item5 is { } group ? new Dictionary<string, GroupData> { ["gate"] = group, ["valve"] = data } : null,
            });

    private static readonly Gen<StreamRecord> Small = Gen.OneOf<StreamRecord>(
        Gen.Select(Count, Maybe(Count), Maybe(Number), AnyOf<StepOutcome>()).Select((s, n, dt, o) => (StreamRecord)new StepRecord { Step = s, Iterations = n, Attempt = n, TimeStep = dt, Outcome = o }),
        Gen.Select(Count, Maybe(Count), Settings).Select((r, f, s) => (StreamRecord)new AppliedRecord { Revision = r, FromStep = f, FromIteration = f, Settings = s }),
        Gen.Select(Count, Text).Select((r, t) => (StreamRecord)new AppliedRecord { Revision = r, Refused = t }),
        Gen.Select(Count, Maybe(Number)).Select((s, t) => (StreamRecord)new CheckpointRecord { Step = s, Time = t, Seconds = t }),
        Gen.Select(Fields, Gen.Bool, Gen.Bool).Select((f, m, r) => (StreamRecord)new ResizeRecord { Fields = f, BasisMapped = m, Reordered = r }),
        Gen.Select(Maybe(Count), MaybeRef(Text)).Select((n, w) => (StreamRecord)new SkippedRecord { Iterations = n, Why = w }),
        Text.Select(t => (StreamRecord)new RemarkRecord { Text = t }),
        Gen.Select(AnyOf<CloseOutcome>(), MaybeRef(Text)).Select((o, r) => (StreamRecord)new CloseRecord { Outcome = o, Reason = r }),
        Gen.Select(MaybeRef(Name), Maybe(Number)).Select((i, s) => (StreamRecord)new BeatRecord { In = i, InsideSeconds = s }),
        Gen.Const((StreamRecord)new UnknownRecord("weather")));

    /// <summary>Any record, with a seq and maybe a time.</summary>
    public static readonly Gen<StreamRecord> Any =
        Gen.Select(Gen.Frequency((2, Open), (4, Iteration), (3, Small)), Gen.Long[1, 1L << 50], Maybe(Time), Gen.Bool)
            .Select((record, seq, at, bare) => record with { Seq = record is OpenRecord ? 0 : record is BeatRecord && bare ? -1 : seq, At = at });

    /// <summary>Any record but those that fix vector lengths, so that any of them may follow any other.</summary>
    public static readonly Gen<StreamRecord> WithoutShape = Any.Where(r => r is not (OpenRecord or ResizeRecord));
}
