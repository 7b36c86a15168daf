using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Secants;

/// <summary>
/// Secant columns V in the order in which they arrived, as V = Q·C: Q (rows × rank) orthonormal, C (rank × columns) a
/// staircase matrix, upper triangular while no column is dependent. Long vectors are touched only when a column arrives,
/// when columns leave and when a vector is projected; every question of order, filter or threshold is answered on C.
/// Column 0 is the oldest. Not safe for concurrent use. Memory: rank + 1 vectors of <see cref="RowCount"/> doubles and C;
/// buffers of columns that left are used again, so the memory is that of the largest rank reached.
/// Source: "Reorthogonalization and stable algorithms for updating the Gram–Schmidt QR factorization",
/// Mathematics of Computation 30 (1976) 772–795 (from memory).
/// </summary>
public sealed class SecantBasis
{
    private readonly List<double[]> coefficients;
    private readonly List<double> norms;
    private readonly List<int> ranks;
    private readonly Stack<AlignedVector> spare = new();
    private AlignedVector[] directions;
    private AlignedVector scratch;
    private readonly ReductionBuffers buffers = new();
    private double[] projected;

    /// <summary>An empty basis.</summary>
    /// <param name="rowCount">Length N of every column, 1 or more.</param>
    /// <param name="capacity">Directions to make room for at first, 1 or more; grows by itself.</param>
    /// <exception cref="ArgumentOutOfRangeException">A size below 1.</exception>
    public SecantBasis(int rowCount, int capacity = 16)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(rowCount, 1);
        ArgumentOutOfRangeException.ThrowIfLessThan(capacity, 1);
        RowCount = rowCount;
        directions = new AlignedVector[capacity];
        projected = new double[capacity];
        coefficients = new List<double[]>(capacity);
        norms = new List<double>(capacity);
        ranks = new List<int>(capacity);
    }

    /// <summary>Length N of the columns.</summary>
    public int RowCount { get; }

    /// <summary>Columns taken and not removed; may exceed <see cref="RowCount"/>.</summary>
    public int ColumnCount => coefficients.Count;

    /// <summary>Number of orthonormal directions, at most min(rows, columns).</summary>
    public int Rank { get; private set; }

    /// <summary>Euclidean norm of column <paramref name="index"/> (arrival order) as it arrived.</summary>
    public double ColumnNorm(int index) => norms[index];

    /// <summary>
    /// The coefficients of column <paramref name="index"/> on the directions it needed: entry i belongs to direction i,
    /// directions beyond the length have coefficient 0. Column = Q · coefficients, up to rounding of 1e-15 of its norm.
    /// </summary>
    public ReadOnlySpan<double> ColumnCoefficients(int index) => coefficients[index];

    internal double[] Entries(int index) => coefficients[index];

    /// <summary>Direction <paramref name="index"/>: a unit vector of <see cref="RowCount"/> entries, valid until the next change.</summary>
    public ReadOnlySpan<double> Direction(int index)
    {
        if ((uint)index >= (uint)Rank) throw new ArgumentOutOfRangeException(nameof(index), index, $"must be 0 to {Rank - 1}");
        return directions[index].Span;
    }

    /// <summary>A copy of C: <see cref="Rank"/> rows, <see cref="ColumnCount"/> columns in arrival order.</summary>
    public SmallMatrix Coefficients()
    {
        var result = new SmallMatrix(Rank, ColumnCount);
        for (int j = 0; j < ColumnCount; j++) coefficients[j].CopyTo(result.Column(j));
        return result;
    }

    /// <summary>
    /// Appends a column as the newest. It is orthogonalised against all directions until what remains is orthogonal to
    /// 1e-15 — twice as a rule, once where the first pass already suffices. A remainder below a few rounding errors of the
    /// column's norm counts as none: the column is taken without a new direction. A zero or not finite column is not taken
    /// and changes nothing. Cost: two to three reads of Q, 4 to 6·N·rank operations.
    /// </summary>
    /// <param name="column"><see cref="RowCount"/> entries, any magnitude.</param>
    /// <exception cref="ArgumentException">The length differs from <see cref="RowCount"/>.</exception>
    public AppendResult Append(ReadOnlySpan<double> column)
    {
        if (column.Length != RowCount)
            throw new ArgumentException($"a column has {RowCount} entries here, this one has {column.Length}", nameof(column));
        MakeRoom();
        AlignedVector vector = spare.TryPop(out AlignedVector used) ? used : AlignedVector.Allocate(RowCount);
        Span<double> work = vector.Span;
        double norm = CopyScaled(column, work, out int exponent);
        if (norm == 0 || !double.IsFinite(norm))
        {
            spare.Push(vector);
            return norm == 0 ? new AppendResult(AppendOutcome.Zero, 0, 0) : new AppendResult(AppendOutcome.NotFinite, double.NaN, 0);
        }
        double scaledNorm = Math.ScaleB(norm, -exponent);
        double remaining = Rank == RowCount ? ProjectOnly(work) : Reduction.Run(directions, Rank, work, scaledNorm, projected, buffers, unit: true);
        bool independent = remaining > Reduction.DependentBelow(Rank) * scaledNorm;

        var entries = new double[independent ? Rank + 1 : Rank];
        for (int i = 0; i < Rank; i++) entries[i] = Math.ScaleB(projected[i], exponent);
        double newDirection = 0;
        if (independent)
        {
            newDirection = entries[Rank] = Math.ScaleB(remaining, exponent);
            directions[Rank++] = vector;
        }
        else
        {
            spare.Push(vector);
        }
        coefficients.Add(entries);
        norms.Add(norm);
        ranks.Add(Rank);
        return new AppendResult(independent ? AppendOutcome.Independent : AppendOutcome.Dependent, norm, newDirection);
    }

    /// <summary>Removes the <paramref name="count"/> oldest columns. Cost: one read and write of Q, 2·N·rank² operations.</summary>
    /// <param name="count">0 to <see cref="ColumnCount"/>.</param>
    public void RemoveOldest(int count)
    {
        if (count < 0 || count > ColumnCount) throw new ArgumentOutOfRangeException(nameof(count), count, $"must be 0 to {ColumnCount}");
        RemoveRange(0, count);
    }

    /// <summary>Removes one column. Directions older than it stay as they are. Cost at most that of <see cref="RemoveOldest"/>.</summary>
    /// <param name="arrivalIndex">0 (oldest) to <see cref="ColumnCount"/> − 1 (newest).</param>
    public void RemoveAt(int arrivalIndex)
    {
        if ((uint)arrivalIndex >= (uint)ColumnCount)
            throw new ArgumentOutOfRangeException(nameof(arrivalIndex), arrivalIndex, $"must be 0 to {ColumnCount - 1}");
        RemoveRange(arrivalIndex, 1);
    }

    /// <summary>Removes all columns; the buffers stay.</summary>
    public void Clear() => RemoveRange(0, ColumnCount);

    /// <summary>
    /// Qᵀr and the norm of what lies outside the span: ‖r − QQᵀr‖, correct to about 1e-16·‖r‖ even when tiny.
    /// Cost: two to three reads of Q.
    /// </summary>
    /// <param name="r"><see cref="RowCount"/> entries. A NaN or infinity makes every result NaN.</param>
    /// <param name="qtr">At least <see cref="Rank"/> entries, written.</param>
    /// <param name="residualNorm">Units of r.</param>
    public void Project(ReadOnlySpan<double> r, Span<double> qtr, out double residualNorm)
    {
        if (r.Length != RowCount) throw new ArgumentException($"{RowCount} entries needed, {r.Length} given", nameof(r));
        if (qtr.Length < Rank) throw new ArgumentException($"room for {Rank} entries needed, {qtr.Length} given", nameof(qtr));
        if (scratch.Length == 0) scratch = AlignedVector.Allocate(RowCount);
        double norm = CopyScaled(r, scratch.Span, out int exponent);
        qtr[..Rank].Clear();
        residualNorm = norm;
        if (norm == 0) return;
        if (!double.IsFinite(norm))
        {
            residualNorm = double.NaN;
            qtr[..Rank].Fill(double.NaN);
            return;
        }
        residualNorm = Math.ScaleB(Reduction.Run(directions, Rank, scratch.Span, Math.ScaleB(norm, -exponent), projected, buffers, unit: false), exponent);
        for (int i = 0; i < Rank; i++) qtr[i] = Math.ScaleB(projected[i], exponent);
    }

    /// <summary>Qᵀv alone, one read of Q.</summary>
    internal void Dots(ReadOnlySpan<double> vector, Span<double> result) => ColumnSweep.Dots(directions, Rank, vector, result);

    private void RemoveRange(int start, int count)
    {
        if (count == 0) return;
        int keptRank = start == 0 ? 0 : ranks[start - 1];
        coefficients.RemoveRange(start, count);
        norms.RemoveRange(start, count);
        ranks.RemoveRange(start, count);
        int oldRank = Rank;
        if (oldRank > keptRank)
        {
            var turn = TailRotation.Of(coefficients, norms, start, keptRank, oldRank);
            if (turn.NewRank > 0) ColumnRotation.Run(directions, keptRank, oldRank - keptRank, turn.Matrix, turn.NewRank, RowCount);
            for (int j = start; j < ColumnCount; j++)
            {
                coefficients[j] = turn.Columns[j - start];
                ranks[j] = turn.Ranks[j - start];
            }
            Rank = keptRank + turn.NewRank;
            for (int i = Rank; i < oldRank; i++) spare.Push(directions[i]);
        }
    }

    private double ProjectOnly(ReadOnlySpan<double> work)
    {
        // The directions already fill the space: what remains is rounding and brings nothing new.
        ColumnSweep.Dots(directions, Rank, work, projected);
        return 0;
    }

    private void MakeRoom()
    {
        if (Rank < directions.Length) return;
        int size = 2 * directions.Length;
        Array.Resize(ref directions, size);
        projected = new double[size];
    }

    /// <summary>Copies a vector, divided by a power of two where its squares would leave the range of a double; returns its own norm.</summary>
    private static double CopyScaled(ReadOnlySpan<double> source, Span<double> target, out int exponent)
    {
        exponent = 0;
        double squares = ColumnSweep.CopyAndSquare(source, target);
        if (squares is > 1e-280 and < 1e280) return Math.Sqrt(squares);
        double norm = LongVector.Norm(source);
        if (norm == 0 || !double.IsFinite(norm)) return norm;
        exponent = Math.ILogB(norm);
        for (int i = 0; i < source.Length; i++) target[i] = Math.ScaleB(source[i], -exponent);
        return norm;
    }
}
