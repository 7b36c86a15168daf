namespace CouplingWatch.Numerics.Secants;

/// <summary>What became of a column handed to <see cref="SecantBasis.Append"/>. The names are stable finding codes.</summary>
public enum AppendOutcome
{
    /// <summary>The column was taken and brought a new direction.</summary>
    Independent,

    /// <summary>The column was taken but lies, to rounding, in the span of the columns before it: no new direction.</summary>
    Dependent,

    /// <summary>All entries are zero: the column was not taken.</summary>
    Zero,

    /// <summary>An entry is NaN or infinite, or the norm overflows: the column was not taken.</summary>
    NotFinite,
}

/// <summary>Result of appending one column.</summary>
/// <param name="Outcome">What became of it.</param>
/// <param name="Norm">Its Euclidean norm in the units of the column; NaN when not finite.</param>
/// <param name="NewDirection">Norm of its part outside the span of the columns before it, same units; 0 when dependent or not taken.</param>
public readonly record struct AppendResult(AppendOutcome Outcome, double Norm, double NewDirection)
{
    /// <summary>The column stands in the basis now.</summary>
    public bool Taken => Outcome is AppendOutcome.Independent or AppendOutcome.Dependent;

    /// <summary>The column brought a new direction.</summary>
    public bool Independent => Outcome == AppendOutcome.Independent;
}
