using CouplingWatch.Numerics.Matrices;

namespace CouplingWatch.Numerics.Vectors;

/// <summary>Turns the columns of a tall matrix by a small one, in place.</summary>
internal static class ColumnRotation
{
    private const int BlockRows = 256;

    /// <summary>
    /// Replaces the columns first … first + count − 1 of Q by their product with G (count × newCount), block by block: one read
    /// and one write of Q. The columns past newCount keep leftovers. Zeros of G at the end of a column cost nothing.
    /// </summary>
    internal static void Run(AlignedVector[] q, int first, int count, SmallMatrix g, int newCount, int rows)
    {
        var old = new double[count * BlockRows];
        var used = new int[newCount];
        for (int j = 0; j < newCount; j++)
        {
            used[j] = count;
            while (used[j] > 0 && g[used[j] - 1, j] == 0) used[j]--;
        }
        for (int start = 0; start < rows; start += BlockRows)
        {
            int n = Math.Min(BlockRows, rows - start);
            for (int l = 0; l < count; l++) q[first + l].Slice(start, n).CopyTo(old.AsSpan(l * BlockRows));
            for (int j = 0; j < newCount; j++)
            {
                Span<double> target = q[first + j].Slice(start, n);
                target.Clear();
                ReadOnlySpan<double> factors = g.Column(j);
                for (int l = 0; l < used[j]; l++) LongVector.AddScaled(target, factors[l], old.AsSpan(l * BlockRows, n));
            }
        }
    }
}
