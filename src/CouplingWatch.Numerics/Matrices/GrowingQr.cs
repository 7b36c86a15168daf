using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Matrices;

/// <summary>
/// Householder QR of a small matrix that takes its columns one at a time, so that a caller may look at the new direction
/// of a column before keeping it. R is upper triangular with a diagonal ≥ 0. Backward stable column by column: scaling a
/// column scales its column of R and nothing else.
/// Source: Golub and Van Loan, Matrix Computations, 3rd ed., §5.2 (from memory).
/// </summary>
public sealed class GrowingQr
{
    private readonly List<double[]> reflectors = [];
    private readonly List<double> signs = [];
    private readonly List<double[]> columns = [];
    private readonly double[] candidate;
    private double candidateDirection = double.NaN;

    /// <summary>An empty factorisation for columns of <paramref name="rows"/> entries.</summary>
    /// <param name="rows">0 or more.</param>
    public GrowingQr(int rows)
    {
        ArgumentOutOfRangeException.ThrowIfNegative(rows);
        Rows = rows;
        candidate = new double[rows];
    }

    /// <summary>Entries of a column.</summary>
    public int Rows { get; }

    /// <summary>Columns kept so far.</summary>
    public int Count => columns.Count;

    /// <summary>R: row i, column j, both below <see cref="Count"/>; 0 below the diagonal.</summary>
    public double R(int row, int column) => row <= column ? columns[column][row] : 0;

    /// <summary>A copy of R, <see cref="Count"/> × <see cref="Count"/>.</summary>
    public SmallMatrix Triangle()
    {
        var result = new SmallMatrix(Count, Count);
        for (int j = 0; j < Count; j++)
            columns[j].AsSpan(0, j + 1).CopyTo(result.Column(j));
        return result;
    }

    /// <summary>
    /// Reduces a column by the kept ones and returns the norm of what is new in it (the R_ii it would get); 0 when no rows
    /// are left. The column is held until <see cref="Keep"/> or the next call. Cost 4 · rows · count.
    /// </summary>
    /// <param name="column">At most <see cref="Rows"/> entries; missing ones are 0.</param>
    public double Offer(ReadOnlySpan<double> column)
    {
        if (column.Length > Rows) throw new ArgumentException($"{column.Length} entries, at most {Rows} fit", nameof(column));
        column.CopyTo(candidate);
        candidate.AsSpan(column.Length).Clear();
        Reflect(candidate);
        candidateDirection = LongVector.Norm(candidate.AsSpan(Math.Min(Count, Rows)));
        return candidateDirection;
    }

    /// <summary>Keeps the column offered last.</summary>
    /// <exception cref="InvalidOperationException">Nothing was offered since the last keep, or no rows are left.</exception>
    public void Keep()
    {
        if (double.IsNaN(candidateDirection)) throw new InvalidOperationException("no finite column was offered since the last one kept");
        int k = Count;
        if (k >= Rows) throw new InvalidOperationException($"{Rows} rows hold at most {Rows} columns");
        var entries = new double[k + 1];
        candidate.AsSpan(0, k).CopyTo(entries);
        entries[k] = candidateDirection;
        double[] reflector = candidate.AsSpan(k).ToArray();
        if (candidateDirection > 0)
        {
            // H = I − 2uuᵀ maps the remainder to ∓‖·‖e₁ without cancellation; the row is flipped where the sign is minus.
            double lead = reflector[0];
            double sign = lead > 0 ? -1 : 1;
            double scale = 1 / candidateDirection;
            for (int i = 0; i < reflector.Length; i++) reflector[i] *= scale;
            reflector[0] -= sign;
            double length = LongVector.Norm(reflector);
            for (int i = 0; i < reflector.Length; i++) reflector[i] /= length;
            signs.Add(sign);
        }
        else
        {
            Array.Clear(reflector);
            signs.Add(1);
        }
        reflectors.Add(reflector);
        columns.Add(entries);
        candidateDirection = double.NaN;
    }

    /// <summary>Replaces y by the full Qᵀy: the first <see cref="Count"/> entries belong to the kept columns, the rest to what they do not span.</summary>
    /// <param name="y"><see cref="Rows"/> entries.</param>
    public void Reflect(Span<double> y)
    {
        if (y.Length != Rows) throw new ArgumentException($"{y.Length} entries, {Rows} needed", nameof(y));
        for (int j = 0; j < Count; j++)
        {
            Span<double> tail = y[j..];
            double share = 2 * LongVector.Dot(reflectors[j], tail);
            if (share != 0) LongVector.AddScaled(tail, -share, reflectors[j]);
            y[j] *= signs[j];
        }
    }

    /// <summary>Solves R·x = y in place by back substitution. A zero on the diagonal gives infinities or NaN.</summary>
    /// <param name="y"><see cref="Count"/> entries.</param>
    public void SolveTriangle(Span<double> y)
    {
        if (y.Length != Count) throw new ArgumentException($"{y.Length} entries, {Count} needed", nameof(y));
        for (int j = Count - 1; j >= 0; j--)
        {
            double[] column = columns[j];
            y[j] /= column[j];
            double value = -y[j];
            for (int i = 0; i < j; i++) y[i] = Math.FusedMultiplyAdd(value, column[i], y[i]);
        }
    }
}
