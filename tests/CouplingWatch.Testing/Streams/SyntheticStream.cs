using CouplingWatch.Records;

namespace CouplingWatch.Testing.Streams;

/// <summary>
/// Residual streams whose behaviour is known because it was written in: one field, level 0, norms that follow a formula. Lazily made, so a
/// stream of a million records costs no memory. The same arguments give the same records.
/// </summary>
public sealed record SyntheticStream
{
    private static readonly DateTimeOffset Start = new(2026, 12, 1, 8, 0, 0, TimeSpan.Zero);

    /// <summary>log10 of the norm at an iteration of a step.</summary>
    public required Func<int, int, double> LogNorm { get; init; }

    /// <summary>Passes of each step.</summary>
    public required Func<int, int> Passes { get; init; }

    public int Steps { get; init; } = 10;

    /// <summary>Target of the norm, declared as the absolute tolerance of the field.</summary>
    public double Target { get; init; } = 1e-7;

    public int Cap { get; init; } = 40;

    public double SecondsAPass { get; init; } = 2.5;

    /// <summary>Uniform noise of the logarithm, ± this many decades; seeded.</summary>
    public double NoiseDecades { get; init; }

    public int Seed { get; init; } = 1;

    /// <summary>Every step falls by the same factor an iteration from 10⁻³ until the target is met.</summary>
    /// <param name="factor">‖r_{k+1}‖ / ‖r_k‖, 0 &lt; factor &lt; 1.</param>
    public static SyntheticStream Linear(double factor, int steps = 10)
    {
        if (factor is not (> 0 and < 1)) throw new ArgumentOutOfRangeException(nameof(factor), factor, "A falling path has a factor between 0 and 1.");
        var passes = (int)Math.Ceiling((-7 + 3) / Math.Log10(factor)) + 1;
        return new SyntheticStream { LogNorm = (_, k) => -3 + (k * Math.Log10(factor)), Passes = _ => Math.Min(passes, 40), Steps = steps };
    }

    /// <summary>As <see cref="Linear"/>, but from one step on the path stays level from an iteration on, and the steps end at the cap.</summary>
    public static SyntheticStream Stall(double factor, int fromStep, int fromIteration, int steps = 10)
    {
        var healthy = Linear(factor, steps);
        return healthy with
        {
            LogNorm = (s, k) => healthy.LogNorm(s, s < fromStep ? k : Math.Min(k, fromIteration)),
            Passes = s => s < fromStep ? healthy.Passes(s) : healthy.Cap,
        };
    }

    /// <summary>As <see cref="Linear"/>, but one step grows by a factor above 1 an iteration to the cap.</summary>
    public static SyntheticStream Divergence(double factor, double growth, int inStep, int steps = 10)
    {
        if (growth <= 1) throw new ArgumentOutOfRangeException(nameof(growth), growth, "A growing path has a factor above 1.");
        var healthy = Linear(factor, steps);
        return healthy with
        {
            LogNorm = (s, k) => s == inStep ? -3 + (k * Math.Log10(growth)) : healthy.LogNorm(s, k),
            Passes = s => s == inStep ? healthy.Cap : healthy.Passes(s),
        };
    }

    /// <summary>A path that falls on the whole while every second iteration stands so many decades above it, as over-relaxation makes it.</summary>
    public static SyntheticStream Alternating(double factor, double decades, int steps = 10)
    {
        var healthy = Linear(factor, steps);
        return healthy with { LogNorm = (s, k) => healthy.LogNorm(s, k) + (k % 2 == 1 && k + 1 < healthy.Passes(s) ? decades : 0) };
    }

    public OpenRecord Open() => new()
    {
        Seq = 0,
        At = Start,
        Instance = "synthetic",
        Campaign = "north-lock",
        Title = "synthetic",
        Fields = [new FieldDeclaration { Name = "deflection", Unit = "m", Absolute = Target, RelativeTo = ToleranceReference.None }],
        Settings = new CouplingSettings { Method = CouplingMethod.IqnIls, Relaxation = 0.1, IterationCap = Cap },
        TimeStep = 0.01,
        EndTime = 0.01 * Steps,
    };

    /// <summary>The stream from open to close.</summary>
    public IEnumerable<StreamRecord> Records()
    {
        yield return Open();
        var random = new Random(Seed);
        long seq = 1;
        var seconds = 0.0;
        for (var step = 0; step < Steps; step++)
        {
            var passes = Passes(step);
            var norm = 0.0;
            for (var k = 0; k < passes; k++)
            {
                seconds += SecondsAPass;
                norm = Math.Pow(10, LogNorm(step, k) + (NoiseDecades * ((2 * random.NextDouble()) - 1)));
                yield return new IterationRecord { Seq = seq++, At = Start.AddSeconds(seconds), Step = step, Iteration = k, Time = 0.01 * (step + 1), Residuals = NamedValues.Of(("deflection", norm)) };
            }
            yield return new StepRecord { Seq = seq++, At = Start.AddSeconds(seconds), Step = step, Iterations = passes, Outcome = norm <= Target ? StepOutcome.Converged : StepOutcome.Capped };
        }
        yield return new CloseRecord { Seq = seq, At = Start.AddSeconds(seconds), Outcome = CloseOutcome.Finished };
    }
}
