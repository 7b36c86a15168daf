namespace CouplingWatch.Coupling;

/// <summary>What one update did, complete enough to be sent as the <c>basis</c> or <c>relaxation</c> of a residual stream.</summary>
public sealed record UpdateReport
{
    /// <summary>The relaxation used; null when the update was not a relaxation.</summary>
    public double? Relaxation { get; init; }

    /// <summary>Columns used, in factor order (newest first); empty for a relaxation.</summary>
    public IReadOnlyList<ColumnName> Columns { get; init; } = [];

    /// <summary>Columns that were available but left out of this update by the filter.</summary>
    public IReadOnlyList<ColumnName> Left { get; init; } = [];

    /// <summary>Triangular factor of the used columns, packed by columns (R₀₀, R₀₁, R₁₁, R₀₂, …), in units of the residual; empty for methods without a single factor.</summary>
    public IReadOnlyList<double> PackedR { get; init; } = [];

    /// <summary>Coefficients c with V c ≈ −r, in the order of <see cref="Columns"/>.</summary>
    public IReadOnlyList<double> Coefficients { get; init; } = [];

    /// <summary>‖r − QQᵀr‖/‖r‖: the share of the residual outside the span of the used columns; null for a relaxation.</summary>
    public double? OutsideShare { get; init; }

    /// <summary>What the surrogate did, for methods that have one.</summary>
    public SurrogateShare? Surrogate { get; init; }
}

/// <summary>The surrogate's part in one update.</summary>
/// <param name="Iterations">Inner evaluations of the surrogate.</param>
/// <param name="Covered">Share of ‖r‖ the surrogate was asked to deal with, 0…1.</param>
public sealed record SurrogateShare(int Iterations, double Covered);
