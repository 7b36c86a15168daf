namespace LockGate.Leaf;

/// <summary>Symmetric positive definite band matrix with three sub-diagonals, factored in place by Cholesky.</summary>
internal sealed class BandMatrix
{
    private const int Band = 3;
    private readonly double[] lower; // entry (i, i − d) at 4·i + d

    public BandMatrix(int size)
    {
        Size = size;
        lower = new double[(Band + 1) * size];
    }

    public int Size { get; }

    /// <summary>Adds to entry (row, column) of the lower triangle; the upper triangle follows by symmetry and is not stored.</summary>
    public void Add(int row, int column, double value)
    {
        if (column > row) return;
        lower[(Band + 1) * row + row - column] += value;
    }

    /// <summary>This = factor · other + this.</summary>
    public void Add(BandMatrix other, double factor)
    {
        for (var i = 0; i < lower.Length; i++) lower[i] += factor * other.lower[i];
    }

    public void CopyFrom(BandMatrix other) => other.lower.CopyTo(lower, 0);

    /// <summary>y += factor · A x.</summary>
    public void MultiplyAdd(ReadOnlySpan<double> x, double factor, Span<double> y)
    {
        for (var i = 0; i < Size; i++)
        {
            y[i] += factor * lower[(Band + 1) * i] * x[i];
            for (var d = 1; d <= Band && d <= i; d++)
            {
                var a = factor * lower[(Band + 1) * i + d];
                y[i] += a * x[i - d];
                y[i - d] += a * x[i];
            }
        }
    }

    /// <summary>Replaces the matrix by its Cholesky factor. Cost O(n·band²).</summary>
    /// <exception cref="InvalidOperationException">The matrix is not positive definite.</exception>
    public void Factor()
    {
        for (var i = 0; i < Size; i++)
        {
            for (var d = Math.Min(Band, i); d >= 0; d--)
            {
                var j = i - d;
                var sum = lower[(Band + 1) * i + d];
                for (var k = Math.Max(0, i - Band); k < j; k++)
                    if (j - k <= Band) sum -= lower[(Band + 1) * i + i - k] * lower[(Band + 1) * j + j - k];
                if (d > 0) lower[(Band + 1) * i + d] = sum / lower[(Band + 1) * j];
                else if (sum > 0) lower[(Band + 1) * i] = Math.Sqrt(sum);
                else throw new InvalidOperationException($"The leaf matrix is not positive definite at row {i} (pivot {sum}).");
            }
        }
    }

    /// <summary>Solves with the factor, in place.</summary>
    public void Solve(Span<double> x)
    {
        for (var i = 0; i < Size; i++)
        {
            for (var d = 1; d <= Band && d <= i; d++) x[i] -= lower[(Band + 1) * i + d] * x[i - d];
            x[i] /= lower[(Band + 1) * i];
        }
        for (var i = Size - 1; i >= 0; i--)
        {
            x[i] /= lower[(Band + 1) * i];
            for (var d = 1; d <= Band && d <= i; d++) x[i - d] -= lower[(Band + 1) * i + d] * x[i];
        }
    }
}
