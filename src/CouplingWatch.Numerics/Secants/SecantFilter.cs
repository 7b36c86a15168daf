namespace CouplingWatch.Numerics.Secants;

/// <summary>Rule by which a filter leaves out columns. R_ii is the new direction of column i against the newer columns still in.</summary>
public enum SecantFilter
{
    /// <summary>Offends when |R_ii| &lt; ε · the largest |R_jj| of the columns still in.</summary>
    PivotRatio,

    /// <summary>Offends when |R_ii| &lt; ε · the column's own norm.</summary>
    OwnNorm,

    /// <summary>Offends only when R_ii is zero to rounding.</summary>
    None,
}

/// <summary>What the filter did with a column.</summary>
public enum ColumnFate
{
    /// <summary>Takes part in the update.</summary>
    Kept,

    /// <summary>Left out by the rule.</summary>
    Left,

    /// <summary>Not looked at: more columns than rows, and this one stands behind the last that fits.</summary>
    Beyond,
}

/// <summary>One line of a filter's ledger.</summary>
/// <param name="Index">Arrival index of the column in its basis.</param>
/// <param name="Fate">Kept, left out or beyond the rows.</param>
/// <param name="OwnNorm">Euclidean norm of the column.</param>
/// <param name="NewDirection">|R_ii|: its part outside the newer columns still in; for a column left out, at the moment it left; NaN when beyond.</param>
/// <param name="Share">What the rule compares with ε: NewDirection over the largest kept |R_jj| (pivot ratio) or over OwnNorm; NaN when beyond.</param>
public readonly record struct ColumnEntry(int Index, ColumnFate Fate, double OwnNorm, double NewDirection, double Share);
