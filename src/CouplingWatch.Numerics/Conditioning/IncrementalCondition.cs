using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Conditioning;

/// <summary>
/// Running estimates of the extreme singular values of an upper triangular matrix that grows by a column at a time, for
/// O(columns) operations each. The estimate of σ_min is never below the true value and that of σ_max never above it, so the
/// estimated condition number is never too large.
/// Source: "Incremental condition estimation", SIAM Journal on Matrix Analysis and Applications 11 (1990) 312–322 (from memory).
/// </summary>
public sealed class IncrementalCondition
{
    private double[] small = new double[8];
    private double[] large = new double[8];

    /// <summary>Columns taken in.</summary>
    public int Count { get; private set; }

    /// <summary>Estimate of the smallest singular value, at or above it; NaN before the first column.</summary>
    public double SmallestEstimate { get; private set; } = double.NaN;

    /// <summary>Estimate of the largest singular value, at or below it; NaN before the first column.</summary>
    public double LargestEstimate { get; private set; } = double.NaN;

    /// <summary>Their ratio, at or below κ₂; infinity for a singular matrix.</summary>
    public double Condition => SmallestEstimate == 0 ? double.PositiveInfinity : LargestEstimate / SmallestEstimate;

    /// <summary>Takes in the next column of R.</summary>
    /// <param name="column">The entries above the diagonal and the diagonal entry: <see cref="Count"/> + 1 of them.</param>
    /// <exception cref="ArgumentException">Another length, or an entry that is not finite.</exception>
    public void Add(ReadOnlySpan<double> column)
    {
        if (column.Length != Count + 1) throw new ArgumentException($"{column.Length} entries, {Count + 1} needed", nameof(column));
        foreach (double entry in column)
            if (!double.IsFinite(entry)) throw new ArgumentException($"entry {entry} is not finite", nameof(column));
        if (Count == small.Length)
        {
            Array.Resize(ref small, 2 * Count);
            Array.Resize(ref large, 2 * Count);
        }
        double diagonal = Math.Abs(column[Count]);
        if (Count == 0)
        {
            SmallestEstimate = LargestEstimate = diagonal;
            small[0] = large[0] = 1;
        }
        else
        {
            ReadOnlySpan<double> above = column[..Count];
            double sign = column[Count] < 0 ? -1 : 1;
            SmallestEstimate = Extend(small, SmallestEstimate, above, diagonal, sign, smallest: true);
            LargestEstimate = Extend(large, LargestEstimate, above, diagonal, sign, smallest: false);
        }
        Count++;
    }

    private double Extend(double[] vector, double estimate, ReadOnlySpan<double> above, double diagonal, double sign, bool smallest)
    {
        double coupling = LongVector.Dot(vector.AsSpan(0, Count), above);
        var (value, old, fresh) = TwoByTwo.LeftVector(estimate, coupling, diagonal, smallest);
        for (int i = 0; i < Count; i++) vector[i] *= old;
        vector[Count] = fresh * sign;
        return value;
    }
}
