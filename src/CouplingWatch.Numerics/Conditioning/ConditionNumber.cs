using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Conditioning;

/// <summary>
/// The condition number κ₂ = σ_max/σ_min of a matrix with at least as many rows as columns, from the singular values of its
/// small triangle. Above about 1e15 only the order of magnitude means anything.
/// Source of the column scaling: "Condition numbers and equilibration of matrices", Numerische Mathematik 14 (1969) 14–23
/// (unit columns come within √columns of the best scaling; from memory).
/// </summary>
/// <param name="Raw">κ₂ as the columns are; 1 or more; infinity when singular.</param>
/// <param name="UnitColumns">κ₂ after every column was divided by its norm; infinity when singular or when a column is zero.</param>
public readonly record struct ConditionNumber(double Raw, double UnitColumns)
{
    /// <summary>Both numbers.</summary>
    /// <param name="matrix">Triangle or any small matrix; fewer rows than columns count as singular.</param>
    /// <returns>NaN for both when an entry is not finite or there is no column. Cost two small decompositions.</returns>
    public static ConditionNumber Of(SmallMatrix matrix)
    {
        ArgumentNullException.ThrowIfNull(matrix);
        double raw = Ratio(matrix);
        return double.IsNaN(raw) ? new ConditionNumber(double.NaN, double.NaN) : new ConditionNumber(raw, OfUnitColumns(matrix));
    }

    /// <summary>κ₂ after every column was divided by its norm, alone: half the cost of both.</summary>
    /// <param name="matrix">As for <see cref="Of"/>.</param>
    /// <returns>NaN when an entry is not finite or there is no column; infinity when singular or when a column is zero.</returns>
    public static double OfUnitColumns(SmallMatrix matrix)
    {
        ArgumentNullException.ThrowIfNull(matrix);
        SmallMatrix unit = matrix.Copy();
        for (int j = 0; j < unit.Columns; j++)
        {
            double norm = LongVector.Norm(unit.Column(j));
            if (double.IsNaN(norm)) return double.NaN;
            if (norm == 0) return double.PositiveInfinity;
            foreach (ref double entry in unit.Column(j)) entry /= norm;
        }
        return Ratio(unit);
    }

    private static double Ratio(SmallMatrix matrix)
    {
        if (matrix.Columns == 0) return double.NaN;
        for (int j = 0; j < matrix.Columns; j++)
            foreach (double entry in matrix.Column(j))
                if (!double.IsFinite(entry)) return double.NaN;
        if (matrix.Rows < matrix.Columns) return double.PositiveInfinity;
        double[] values = TruncatedSvd.ValuesOf(matrix);
        return values[^1] > 0 ? values[0] / values[^1] : double.PositiveInfinity;
    }
}
