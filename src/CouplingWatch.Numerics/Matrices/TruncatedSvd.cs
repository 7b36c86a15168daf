namespace CouplingWatch.Numerics.Matrices;

/// <summary>
/// Singular value decomposition A = U·S·Vᵀ of a small matrix, of which only σ &gt; cut·σ_max is used: pseudo-inverse and
/// least squares of smallest norm. Immutable.
/// Source: Golub and Van Loan, Matrix Computations, 3rd ed., §5.5 (from memory).
/// </summary>
public sealed class TruncatedSvd
{
    private TruncatedSvd(SmallMatrix left, double[] kept, SmallMatrix right, double[] all)
    {
        Left = left;
        Kept = kept;
        Right = right;
        SingularValues = all;
    }

    /// <summary>U of the kept singular values: rows × rank.</summary>
    public SmallMatrix Left { get; }

    /// <summary>V of the kept singular values: columns × rank.</summary>
    public SmallMatrix Right { get; }

    /// <summary>The kept singular values, falling.</summary>
    public double[] Kept { get; }

    /// <summary>All min(rows, columns) singular values, falling.</summary>
    public double[] SingularValues { get; }

    /// <summary>How many singular values were kept; 0 for a zero matrix.</summary>
    public int Rank => Kept.Length;

    /// <summary>Decomposes a matrix.</summary>
    /// <param name="matrix">Finite entries, any shape with at least one row and column. Cost about 20·rows·columns·min(rows, columns).</param>
    /// <param name="cut">Relative cut, 0 ≤ cut &lt; 1; with 0 every σ above 0 is kept.</param>
    /// <exception cref="ArgumentException">An entry is not finite, or the matrix is empty.</exception>
    public static TruncatedSvd Of(SmallMatrix matrix, double cut)
    {
        ArgumentNullException.ThrowIfNull(matrix);
        if (!(cut >= 0 && cut < 1)) throw new ArgumentOutOfRangeException(nameof(cut), cut, "must be at least 0 and below 1");
        Check(matrix);
        bool wide = matrix.Rows < matrix.Columns;
        SmallMatrix turned = wide ? matrix.Transpose() : matrix.Copy();
        SmallMatrix rotation = SmallMatrix.Identity(turned.Columns);
        double[] all = JacobiSvd.Run(turned, rotation);
        int rank = 0;
        while (rank < all.Length && all[rank] > 0 && all[rank] > cut * all[0]) rank++;
        var scaled = new SmallMatrix(turned.Rows, rank);
        var plain = new SmallMatrix(rotation.Rows, rank);
        for (int k = 0; k < rank; k++)
        {
            for (int i = 0; i < turned.Rows; i++) scaled[i, k] = turned[i, k] / all[k];
            rotation.Column(k).CopyTo(plain.Column(k));
        }
        var (left, right) = wide ? (plain, scaled) : (scaled, plain);
        return new TruncatedSvd(left, all[..rank], right, all);
    }

    /// <summary>The singular values alone, falling: all min(rows, columns) of them, at half the cost.</summary>
    /// <exception cref="ArgumentException">An entry is not finite, or the matrix is empty.</exception>
    public static double[] ValuesOf(SmallMatrix matrix)
    {
        ArgumentNullException.ThrowIfNull(matrix);
        Check(matrix);
        return JacobiSvd.Run(matrix.Rows < matrix.Columns ? matrix.Transpose() : matrix.Copy(), null);
    }

    /// <summary>The x of smallest norm that minimises ‖A·x − b‖ within the kept singular values.</summary>
    /// <param name="b">As many entries as A has rows.</param>
    public double[] Solve(ReadOnlySpan<double> b)
    {
        if (b.Length != Left.Rows) throw new ArgumentException($"{b.Length} entries, {Left.Rows} needed", nameof(b));
        var x = new double[Right.Rows];
        for (int k = 0; k < Rank; k++)
            Vectors.LongVector.AddScaled(x, Vectors.LongVector.Dot(Left.Column(k), b) / Kept[k], Right.Column(k));
        return x;
    }

    /// <summary>A⁺, columns × rows.</summary>
    public SmallMatrix PseudoInverse()
    {
        var result = new SmallMatrix(Right.Rows, Left.Rows);
        for (int i = 0; i < Left.Rows; i++)
            for (int k = 0; k < Rank; k++)
                Vectors.LongVector.AddScaled(result.Column(i), Left[i, k] / Kept[k], Right.Column(k));
        return result;
    }

    /// <summary>B·A⁺: the linear map that takes the columns of A to those of B, of smallest norm. B has as many columns as A.</summary>
    public SmallMatrix MapTo(SmallMatrix images)
    {
        ArgumentNullException.ThrowIfNull(images);
        if (images.Columns != Right.Rows) throw new ArgumentException($"{images.Columns} columns, {Right.Rows} needed", nameof(images));
        SmallMatrix along = images.Times(Right);
        for (int k = 0; k < Rank; k++)
            foreach (ref double value in along.Column(k)) value /= Kept[k];
        return along.Times(Left.Transpose());
    }

    private static void Check(SmallMatrix matrix)
    {
        if (matrix.Rows == 0 || matrix.Columns == 0) throw new ArgumentException($"a {matrix.Rows}×{matrix.Columns} matrix has no singular values", nameof(matrix));
        for (int j = 0; j < matrix.Columns; j++)
            foreach (double entry in matrix.Column(j))
                if (!double.IsFinite(entry)) throw new ArgumentException($"entry {entry} in column {j} is not finite", nameof(matrix));
    }
}
