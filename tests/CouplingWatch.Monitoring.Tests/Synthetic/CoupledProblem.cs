using CouplingWatch.Coupling;
using CouplingWatch.Monitoring;
using CouplingWatch.Numerics.Vectors;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Tests.Synthetic;

/// <summary>
/// A coupled problem of our own with known spectrum: x̃ = b(n) + M(x) with M symmetric of given eigenvalues on sine modes, an optional cubic stiffening and
/// noise that differs from pass to pass. It is solved by the methods of CouplingWatch.Coupling and yields the records such a code would send.
/// </summary>
internal sealed class CoupledProblem
{
    public int Size { get; init; } = 24;

    /// <summary>Eigenvalue of mode m (0, 1, …) of the pass.</summary>
    public Func<int, double> Eigenvalue { get; init; } = m => -9.0 / ((m + 1) * (m + 1));

    /// <summary>Load of a step; multiplies a fixed smooth shape that wanders slowly.</summary>
    public Func<int, double> Load { get; init; } = n => 1 + 0.1 * n;

    /// <summary>Scale of all eigenvalues at a step.</summary>
    public Func<int, double> Strength { get; init; } = _ => 1;

    /// <summary>Weight of the cubic term.</summary>
    public double Cubic { get; init; }

    /// <summary>Relative noise of each pass.</summary>
    public double Noise { get; init; }

    public double Tolerance { get; init; } = 1e-7;

    public MethodSettings Method { get; init; } = new() { Method = MethodKind.IqnIls, Relaxation = 0.1, HistorySteps = 4, FilterThreshold = 1e-4 };

    public int Cap { get; init; } = 40;

    public int Steps { get; init; } = 30;

    public int Seed { get; init; } = 1;

    /// <summary>3 vectors, 2 reports with triangle, 1 magnitudes, 0 norms.</summary>
    public int Level { get; init; } = 3;

    public double? DeclaredNoise { get; init; }

    public bool SendsStepRecords { get; init; } = true;

    /// <summary>True where the attempt at a step is to be rejected after these many iterations; then tried again.</summary>
    public Func<int, int, int?> RejectAfter { get; init; } = (_, _) => null;

    public bool SendsAttempts { get; init; }

    /// <summary>Changes an iteration record before it is sent.</summary>
    public Func<IterationRecord, IterationRecord> Sent { get; init; } = r => r;

    public Func<OpenRecord, OpenRecord> Opened { get; init; } = r => r;

    public RunMonitor Judge()
    {
        var monitor = new RunMonitor("own");
        foreach (var record in Records()) monitor.Observe(record, DateTimeOffset.UnixEpoch);
        monitor.EndOfRecording();
        return monitor;
    }

    public IEnumerable<StreamRecord> Records()
    {
        long seq = 0;
        var clock = new DateTimeOffset(2026, 12, 1, 8, 0, 0, TimeSpan.Zero);
        yield return Opened(Open()) with { Seq = seq++, At = clock };
        var random = new Random(Seed);
        var coupling = new SteppedCoupling(Size, Method);
        double[] end = new double[Size], before = new double[Size], x = new double[Size];
        for (int step = 0, attempt = 0; step < Steps;)
        {
            for (var i = 0; i < Size; i++) x[i] = step < 2 ? end[i] : 2 * end[i] - before[i];
            coupling.BeginStep(step, attempt);
            var outcome = StepOutcome.Capped;
            var count = 0;
            double[] output = [];
            for (var k = 0; k < Cap; k++)
            {
                output = Pass(x, step, random);
                var residual = output.Zip(x, (a, b) => a - b).ToArray();
                var done = LongVector.Norm(residual) <= Tolerance * LongVector.Norm(output);
                count = k + 1;
                if (done || !double.IsFinite(LongVector.Norm(residual))) coupling.Observe(residual, output);
                else coupling.Update(residual, output, x);
                clock = clock.AddSeconds(2 + 0.1 * Math.Sin(k));
                yield return Sent(Iteration(step, attempt, k, residual, output, done ? null : coupling.Report)) with { Seq = seq++, At = clock };
                if (done) outcome = StepOutcome.Converged;
                else if (!double.IsFinite(LongVector.Norm(residual)) || LongVector.Norm(residual) > 1e12) outcome = StepOutcome.Failed;
                else if (RejectAfter(step, attempt) <= count) outcome = StepOutcome.Rejected;
                if (outcome != StepOutcome.Capped) break;
            }
            coupling.EndStep(outcome is StepOutcome.Converged or StepOutcome.Capped);
            if (SendsStepRecords) yield return new StepRecord { Seq = seq++, Step = step, Attempt = SendsAttempts ? attempt : null, Iterations = count, Outcome = outcome };
            if (outcome == StepOutcome.Failed) break;
            if (outcome == StepOutcome.Rejected)
            {
                attempt++;
                continue;
            }
            (before, end) = (end, output);
            (step, attempt) = (step + 1, 0);
        }
        yield return new CloseRecord { Seq = seq, Outcome = CloseOutcome.Finished };
    }

    private double[] Pass(double[] x, int step, Random random)
    {
        var output = new double[Size];
        for (var m = 0; m < Size; m++)
        {
            var amount = 0.0;
            for (var i = 0; i < Size; i++) amount += x[i] * Mode(m, i);
            var load = Load(step) * Math.Sin(1.3 * (m + 1) + 0.05 * step) / ((m + 1) * (m + 1));
            var image = Strength(step) * Eigenvalue(m) * amount - Cubic * amount * amount * amount + load;
            for (var i = 0; i < Size; i++) output[i] += image * Mode(m, i);
        }
        var size = LongVector.Norm(output) / Math.Sqrt(Size);
        for (var i = 0; i < Size && Noise > 0; i++) output[i] += Noise * size * (2 * random.NextDouble() - 1);
        return output;
    }

    private double Mode(int m, int i) => Math.Sqrt(2.0 / (Size + 1)) * Math.Sin(Math.PI * (m + 1) * (i + 1) / (Size + 1));

    private OpenRecord Open() => new()
    {
        Title = "own problem",
        Solvers = [new SolverDeclaration("gate", DeclaredNoise), new SolverDeclaration("basin")],
        Fields = [new FieldDeclaration { Name = "displacement", Unit = "m", Size = Size, Relative = Tolerance, Absolute = 0 }],
        Settings = new CouplingSettings
        {
            Method = Method.Method switch { MethodKind.Fixed => CouplingMethod.Fixed, MethodKind.Aitken => CouplingMethod.Aitken, _ => CouplingMethod.IqnIls },
            Relaxation = Method.Relaxation,
            HistorySteps = Method.HistorySteps,
            FilterRule = Method.FilterRule == Numerics.Secants.SecantFilter.OwnNorm ? FilterRule.OwnNorm : FilterRule.PivotRatio,
            FilterThreshold = Method.FilterThreshold,
            IterationCap = Cap,
            PredictorOrder = 1,
        },
    };

    private IterationRecord Iteration(int step, int attempt, int iteration, double[] residual, double[] output, UpdateReport? report)
    {
        var basis = report is null || report.Columns.Count == 0 ? null : new BasisReport(
            [.. report.Columns.Select(c => new ColumnBirth(c.Step, c.Iteration, c.Attempt))],
            [.. report.Left.Select(c => new ColumnBirth(c.Step, c.Iteration, c.Attempt))],
            Level == 2 ? [.. report.PackedR] : null, Level == 2 ? [.. report.Coefficients] : null);
        return new IterationRecord
        {
            Step = step,
            Iteration = iteration,
            Attempt = SendsAttempts ? attempt : null,
            Residuals = NamedValues.Of(("displacement", LongVector.Norm(residual))),
            Magnitudes = Level >= 1 ? NamedValues.Of(("displacement", LongVector.Norm(output))) : null,
            Relaxation = report?.Relaxation,
            Vectors = Level >= 3 ? new VectorPair((double[])residual.Clone(), (double[])output.Clone()) : null,
            Basis = Level >= 2 ? basis : null,
        };
    }
}
