namespace CouplingWatch.Records;

/// <summary>One coupling iteration, sent at the end of its pass. Only step, iteration and residuals are required.</summary>
public sealed record IterationRecord : StreamRecord
{
    public override string Kind => "iteration";
    public required int Step { get; init; }
    public required int Iteration { get; init; }
    public int? Attempt { get; init; }
    /// <summary>End of the step in the run's own time.</summary>
    public double? Time { get; init; }
    public double? TimeStep { get; init; }
    /// <summary>Norm of the residual of each field, unweighted, in the field's unit and norm.</summary>
    public required NamedValues Residuals { get; init; }
    /// <summary>Norm of the output of each field.</summary>
    public NamedValues? Magnitudes { get; init; }
    /// <summary>Target of each field's residual norm, where the code's rule is its own.</summary>
    public NamedValues? Targets { get; init; }
    /// <summary>1 where the code holds the field for converged, 0 where not.</summary>
    public NamedValues? Met { get; init; }
    /// <summary>Wall seconds by solver.</summary>
    public NamedValues? Seconds { get; init; }
    public double? PassSeconds { get; init; }
    /// <summary>Stands only where the update was a relaxation.</summary>
    public double? Relaxation { get; init; }
    public IReadOnlyList<WorstResidual> Worst { get; init; } = [];
    public VectorPair? Vectors { get; init; }
    public SketchPair? Sketch { get; init; }
    public BasisReport? Basis { get; init; }
    public SurrogateReport? Surrogate { get; init; }
    /// <summary>Level 2 and 3 data by group, for runs with several bases.</summary>
    public IReadOnlyDictionary<string, GroupData>? Groups { get; init; }
}

/// <param name="At">Coordinates, if sent.</param>
public sealed record WorstResidual(string Field, int Index, double Value, double[]? At = null);

/// <summary>Residual r and output x̃ of the stacked unknown fields, unweighted; same length N.</summary>
public sealed record VectorPair(double[] Residual, double[] Output);

/// <summary>Sparse sign sketches of the two vectors; <see cref="Rows"/> a multiple of 8.</summary>
/// <param name="FullRows">Length of the vectors this sketch was kept instead of; null where the sender made the sketch.</param>
public sealed record SketchPair(int Rows, long Seed, double[] Residual, double[] Output, int? FullRows = null);

/// <summary>Birth of a secant column: the earlier of the two iterations it was formed from.</summary>
public readonly record struct ColumnBirth(int Step, int Iteration, int Attempt = 0);

/// <summary>The update made after this pass, as the code made it.</summary>
/// <param name="Columns">Columns used, in factor order (newest first).</param>
/// <param name="Left">Columns left out of this update.</param>
/// <param name="R">Upper triangle packed by columns (R₀₀, R₀₁, R₁₁, …); null when not sent.</param>
/// <param name="Coefficients">c with V c ≈ −r; null when not sent.</param>
public sealed record BasisReport(ColumnBirth[] Columns, ColumnBirth[] Left, double[]? R, double[]? Coefficients);

/// <param name="Covered">Share of the residual norm the surrogate covered, 0…1.</param>
public sealed record SurrogateReport(int? Iterations, double? Seconds, double? Covered);

public sealed record GroupData(VectorPair? Vectors, SketchPair? Sketch, BasisReport? Basis);
