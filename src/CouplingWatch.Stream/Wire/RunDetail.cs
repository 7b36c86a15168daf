using System.Text.Json.Nodes;
using CouplingWatch.Records;

namespace CouplingWatch.Wire;

/// <summary>Everything the run page shows. Parts that cannot be judged are null and stand in <see cref="NotJudged"/>.</summary>
public sealed record RunDetail
{
    public required RunSummary Summary { get; init; }
    /// <summary>What the verdict rests on: "16 complete steps, norms, seconds and full vectors (level 3)".</summary>
    public required string RestsOn { get; init; }
    public IReadOnlyList<NotJudged> NotJudged { get; init; } = [];
    public IReadOnlyList<CheckHealth> Checks { get; init; } = [];
    public required CouplingSettings Settings { get; init; }
    public AdjustableSettings Adjustable { get; init; } = new();
    public IReadOnlyList<SettingsRevision> Revisions { get; init; } = [];
    public IReadOnlyList<Advice> Advice { get; init; } = [];
    /// <summary>The race that runs, or the latest one; null when there was none.</summary>
    public RaceView? Race { get; init; }
    public IReadOnlyList<SolverDeclaration> Solvers { get; init; } = [];
    public IReadOnlyList<FieldDeclaration> Fields { get; init; } = [];
    public double? Time { get; init; }
    public double? TimeStep { get; init; }
    public double? EndTime { get; init; }

    // 1 Is it converging?
    public IReadOnlyList<FieldPath> Paths { get; init; } = [];
    public RateEstimate? Rate { get; init; }
    public StepForecast? StepForecast { get; init; }
    public IReadOnlyList<GoverningStep> Governing { get; init; } = [];
    // 2 Is the basis sound?
    public BasisView? Basis { get; init; }
    public IReadOnlyList<ConditionPoint> Condition { get; init; } = [];
    // 3 What carries the residual?
    public IReadOnlyList<SplitBar> Split { get; init; } = [];
    // 4 What does a pass do?
    public SpectrumView? Spectrum { get; init; }
    // 5 What does it cost?
    public CostView? Cost { get; init; }
    public IReadOnlyList<LogEntry> Log { get; init; } = [];
}

/// <param name="State">ok, raised, learning, not-judged, off.</param>
public sealed record CheckHealth(string Check, string State, string Text, JsonObject? Evidence = null);

/// <summary>The residual path of one field in the step in progress, over the band of earlier steps.</summary>
public sealed record FieldPath
{
    public required string Field { get; init; }
    public string? Unit { get; init; }
    public bool Governs { get; init; }
    public double? Target { get; init; }
    public int? Cap { get; init; }
    public IReadOnlyList<PathPoint> Points { get; init; } = [];
    public IReadOnlyList<BandPoint> Band { get; init; } = [];
    public int BandSteps { get; init; }
    public WorstResidual? Worst { get; init; }
    /// <summary>|r| along the interface, at most 60 values (largest of each group of neighbours); null without vectors.</summary>
    public double[]? Along { get; init; }
}

/// <param name="Need">log10(norm / target); null when no tolerance is known.</param>
public sealed record PathPoint(int Iteration, double Norm, double? Need);

/// <summary>10 % and 90 % quantile of log10(norm / target) of the earlier steps at that iteration.</summary>
public sealed record BandPoint(int Iteration, double Low, double High);

/// <summary>Factor an iteration: 10^slope of the last six z, with its band.</summary>
public sealed record RateEstimate(double Factor, double Low, double High);

/// <summary>Iterations still to do in the step in progress.</summary>
/// <param name="Basis">paths (earlier steps) or rate.</param>
public sealed record StepForecast(double Remaining, double? Low, double? High, string Basis, int AtIteration, double Need);

/// <param name="Lead">By how many iterations the governing field arrived after the next one.</param>
public sealed record GoverningStep(int Step, string Field, double Lead);

/// <summary>The secant basis at one iteration: which columns, what each brings, kept or left out.</summary>
public sealed record BasisView
{
    public required int Step { get; init; }
    public required int Iteration { get; init; }
    public string? Group { get; init; }
    public required FilterRule Rule { get; init; }
    public required double Threshold { get; init; }
    /// <summary>vectors (level 3), sketch, or reported (level 2).</summary>
    public required string Source { get; init; }
    public IReadOnlyList<BasisColumn> Columns { get; init; } = [];
    public int Kept { get; init; }
    /// <summary>κ₂ of the kept columns as they are, and with unit columns; null with fewer than one kept.</summary>
    public double? Condition { get; init; }
    public double? ConditionUnit { get; init; }
    /// <summary>Declared noise × κ (unit columns); null without declared noise.</summary>
    public double? CoefficientError { get; init; }
    /// <summary>c: share of the residual that the kept columns do not claim to remove.</summary>
    public double? Uncovered { get; init; }
    public double? AdvisedThreshold { get; init; }
    public double? DeclaredNoise { get; init; }
    public IReadOnlyList<WhatIf> WhatIf { get; init; } = [];
}

/// <param name="Share">Under own-norm: new direction ÷ own norm against the columns kept before it; under pivot-ratio: |R_ii| ÷ the largest kept.</param>
public sealed record BasisColumn(ColumnBirth Birth, int AgeSteps, double Share, bool Kept);

public sealed record WhatIf(FilterRule Rule, double Threshold, bool InForce, int Kept, double? ConditionUnit, double? Uncovered);

public sealed record ConditionPoint(int Step, int Iteration, double? Raw, double? Unit, double? CoefficientError);

/// <summary>Shares of ‖r‖² of one iteration: live + history + surrogate + uncovered = 1.</summary>
/// <param name="LeftOver">c of the update made after this pass: at most this share was to be left.</param>
/// <param name="Came">‖r_{k+1}‖/‖r_k‖; null until the next pass is done.</param>
/// <param name="Promise">kept, broken, none-made, open.</param>
public sealed record SplitBar(int Iteration, double Live, double History, double Surrogate, double Uncovered, double? LeftOver, double? Came, string Promise);

/// <summary>Ritz values of the pass on the directions seen.</summary>
public sealed record SpectrumView
{
    public IReadOnlyList<RitzValue> Values { get; init; } = [];
    public int Directions { get; init; }
    public double? LambdaMin { get; init; }
    public double? LambdaMax { get; init; }
    /// <summary>Largest fixed relaxation that tames the directions seen; best fixed relaxation. Null when an imaginary part is too large or too few directions were seen.</summary>
    public double? RelaxationLimit { get; init; }
    public double? RelaxationBest { get; init; }
    public double? RelaxationInForce { get; init; }
    public string? Why { get; init; }
}

/// <param name="Tamed">|1 − ω(1 − λ)| &lt; 1 for the relaxation in force.</param>
public sealed record RitzValue(double Real, double Imaginary, bool Tamed);

public sealed record CostView
{
    public IReadOnlyList<SolverSeconds> Solvers { get; init; } = [];
    public double? WaitingSeconds { get; init; }
    public double? PassSeconds { get; init; }
    public int Passes { get; init; }
    public double? NodeHoursSpent { get; init; }
    public double? NodeHoursLost { get; init; }
    public string? LostText { get; init; }
    public int? LastCheckpointStep { get; init; }
    public int? LastSafeCheckpointStep { get; init; }
    public int? JobsStillNeeded { get; init; }
    public string SurrogateText { get; init; } = "no surrogate in use";
}

public sealed record SolverSeconds(string Solver, double Median);

/// <param name="What">open, alert, closed, settings, applied, refused, checkpoint, remark, skipped, resize, close, learning, note.</param>
public sealed record LogEntry(long Seq, DateTimeOffset? At, string What, string Text, int? Step = null);

/// <summary>The iterations of a step with what was known as each arrived.</summary>
public sealed record IterationView(int Step, int Iteration, int? Attempt, long Seq, IReadOnlyDictionary<string, double> Residuals, double Norm, double? Need, double? Rate, double? ForecastRemaining, double? Relaxation, bool Done);
