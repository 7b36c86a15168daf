namespace CouplingWatch.Numerics.Matrices;

/// <summary>
/// A dense matrix of a size that fits a cache (a few hundred rows and columns), stored by columns.
/// Row i, column j, both from 0. Entries may be any double, NaN and infinities included; nothing is checked on write.
/// </summary>
public sealed class SmallMatrix
{
    private readonly double[] entries;

    /// <summary>A matrix of zeros.</summary>
    /// <param name="rows">0 or more.</param>
    /// <param name="columns">0 or more.</param>
    /// <exception cref="ArgumentOutOfRangeException">A negative size.</exception>
    public SmallMatrix(int rows, int columns)
    {
        ArgumentOutOfRangeException.ThrowIfNegative(rows);
        ArgumentOutOfRangeException.ThrowIfNegative(columns);
        Rows = rows;
        Columns = columns;
        entries = new double[checked(rows * columns)];
    }

    /// <summary>Number of rows.</summary>
    public int Rows { get; }

    /// <summary>Number of columns.</summary>
    public int Columns { get; }

    /// <summary>Entry in row <paramref name="row"/>, column <paramref name="column"/>.</summary>
    /// <exception cref="ArgumentOutOfRangeException">Outside the matrix.</exception>
    public double this[int row, int column]
    {
        get => entries[Offset(row, column)];
        set => entries[Offset(row, column)] = value;
    }

    /// <summary>The entries of one column, writable, without copying.</summary>
    public Span<double> Column(int column)
    {
        if ((uint)column >= (uint)Columns) throw new ArgumentOutOfRangeException(nameof(column), column, $"must be 0 to {Columns - 1}");
        return entries.AsSpan(column * Rows, Rows);
    }

    /// <summary>A matrix with the given columns.</summary>
    /// <param name="columns">At least one; all of one length.</param>
    /// <exception cref="ArgumentException">No column, or lengths that differ.</exception>
    public static SmallMatrix FromColumns(IReadOnlyList<double[]> columns)
    {
        ArgumentNullException.ThrowIfNull(columns);
        if (columns.Count == 0) throw new ArgumentException("at least one column is needed", nameof(columns));
        var result = new SmallMatrix(columns[0].Length, columns.Count);
        for (int j = 0; j < columns.Count; j++)
        {
            if (columns[j].Length != result.Rows)
                throw new ArgumentException($"column {j} has {columns[j].Length} entries, column 0 has {result.Rows}", nameof(columns));
            columns[j].CopyTo(result.Column(j));
        }
        return result;
    }

    /// <summary>A square upper triangular matrix from its entries packed by columns: R₀₀, R₀₁, R₁₁, R₀₂, …</summary>
    /// <param name="packed">n(n + 1)/2 entries for a triangle of n columns.</param>
    /// <exception cref="ArgumentException">No whole triangle has that many entries.</exception>
    public static SmallMatrix FromPackedTriangle(ReadOnlySpan<double> packed)
    {
        int size = (int)((Math.Sqrt((8.0 * packed.Length) + 1) - 1) / 2);
        if (size * (size + 1) / 2 != packed.Length) throw new ArgumentException($"{packed.Length} entries are no packed triangle", nameof(packed));
        var result = new SmallMatrix(size, size);
        for (int j = 0, start = 0; j < size; start += ++j) packed.Slice(start, j + 1).CopyTo(result.Column(j));
        return result;
    }

    /// <summary>The identity of a size.</summary>
    public static SmallMatrix Identity(int size)
    {
        var result = new SmallMatrix(size, size);
        for (int i = 0; i < size; i++) result[i, i] = 1;
        return result;
    }

    /// <summary>The transpose, as a copy.</summary>
    public SmallMatrix Transpose()
    {
        var result = new SmallMatrix(Columns, Rows);
        for (int j = 0; j < Columns; j++)
            for (int i = 0; i < Rows; i++) result.entries[(i * Columns) + j] = entries[(j * Rows) + i];
        return result;
    }

    /// <summary>The product with another matrix. Cost rows × columns × columns of the other.</summary>
    /// <exception cref="ArgumentException">The inner sizes differ.</exception>
    public SmallMatrix Times(SmallMatrix right)
    {
        ArgumentNullException.ThrowIfNull(right);
        if (Columns != right.Rows)
            throw new ArgumentException($"a {Rows}×{Columns} matrix cannot be multiplied by a {right.Rows}×{right.Columns} one", nameof(right));
        var result = new SmallMatrix(Rows, right.Columns);
        for (int j = 0; j < right.Columns; j++)
        {
            Span<double> target = result.Column(j);
            ReadOnlySpan<double> factors = right.Column(j);
            for (int l = 0; l < factors.Length; l++)
                Add(target, Column(l), factors[l]);
        }
        return result;
    }

    /// <summary>The product of the transpose with another matrix. Cost columns × rows × columns of the other.</summary>
    /// <exception cref="ArgumentException">The numbers of rows differ.</exception>
    public SmallMatrix TransposeTimes(SmallMatrix right)
    {
        ArgumentNullException.ThrowIfNull(right);
        if (Rows != right.Rows)
            throw new ArgumentException($"the transpose of a {Rows}×{Columns} matrix cannot be multiplied by a {right.Rows}×{right.Columns} one", nameof(right));
        var result = new SmallMatrix(Columns, right.Columns);
        for (int j = 0; j < right.Columns; j++)
            for (int i = 0; i < Columns; i++)
                result[i, j] = Vectors.LongVector.Dot(Column(i), right.Column(j));
        return result;
    }

    /// <summary>The product with a vector of <see cref="Columns"/> entries; the result has <see cref="Rows"/> entries.</summary>
    public double[] Times(ReadOnlySpan<double> vector)
    {
        if (vector.Length != Columns) throw new ArgumentException($"{vector.Length} entries, {Columns} needed", nameof(vector));
        var result = new double[Rows];
        for (int j = 0; j < Columns; j++) Add(result, Column(j), vector[j]);
        return result;
    }

    /// <summary>A copy that shares nothing with this matrix.</summary>
    public SmallMatrix Copy()
    {
        var result = new SmallMatrix(Rows, Columns);
        entries.CopyTo(result.entries, 0);
        return result;
    }

    /// <summary>All entries by columns, for the libraries that take them so.</summary>
    internal double[] ToColumnMajor() => (double[])entries.Clone();

    private static void Add(Span<double> target, ReadOnlySpan<double> source, double factor)
    {
        if (factor == 0) return;
        for (int i = 0; i < target.Length; i++) target[i] = Math.FusedMultiplyAdd(factor, source[i], target[i]);
    }

    private int Offset(int row, int column)
    {
        if ((uint)row >= (uint)Rows) throw new ArgumentOutOfRangeException(nameof(row), row, $"must be 0 to {Rows - 1}");
        if ((uint)column >= (uint)Columns) throw new ArgumentOutOfRangeException(nameof(column), column, $"must be 0 to {Columns - 1}");
        return column * Rows + row;
    }
}
