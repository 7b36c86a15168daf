using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Secants;

/// <summary>
/// Restores the staircase form of C after columns left: an orthonormal G with C_tail = G·C'_tail, found by Gram–Schmidt twice
/// on the small columns. The long directions follow as Q'_tail = Q_tail·G. A column that was dependent only on a column
/// that left becomes independent here.
/// </summary>
internal sealed class TailRotation
{
    private TailRotation(SmallMatrix matrix, int newRank, double[][] columns, int[] ranks)
    {
        Matrix = matrix;
        NewRank = newRank;
        Columns = columns;
        Ranks = ranks;
    }

    /// <summary>G: one row per old tail direction; the first <see cref="NewRank"/> columns count.</summary>
    internal SmallMatrix Matrix { get; }

    internal int NewRank { get; }

    /// <summary>New coefficients of the columns from the given start on.</summary>
    internal double[][] Columns { get; }

    /// <summary>Rank reached after each of them.</summary>
    internal int[] Ranks { get; }

    internal static TailRotation Of(List<double[]> coefficients, List<double> norms, int start, int keptRank, int oldRank)
    {
        int tail = oldRank - keptRank, count = coefficients.Count - start, rank = 0;
        var g = new SmallMatrix(tail, Math.Min(tail, count));
        var columns = new double[count][];
        var ranks = new int[count];
        var work = new double[tail];
        var c = new double[tail];
        for (int j = 0; j < count; j++)
        {
            double[] old = coefficients[start + j];
            Array.Clear(work);
            Array.Clear(c);
            int inside = Math.Min(keptRank, old.Length);
            old.AsSpan(inside).CopyTo(work);
            double norm = norms[start + j];
            int exponent = norm is > 1e-140 and < 1e140 ? 0 : Math.ILogB(norm);
            if (exponent != 0)
                for (int i = 0; i < tail; i++) work[i] = Math.ScaleB(work[i], -exponent);
            for (int pass = 0; pass < 2; pass++)
            {
                for (int i = 0; i < rank; i++)
                {
                    double share = LongVector.Dot(g.Column(i), work);
                    LongVector.AddScaled(work, -share, g.Column(i));
                    c[i] += share;
                }
            }
            double left = LongVector.Norm(work);
            bool independent = rank < g.Columns && left > Reduction.DependentBelow(keptRank + rank) * Math.ScaleB(norm, -exponent);
            if (independent)
            {
                Span<double> direction = g.Column(rank);
                for (int i = 0; i < tail; i++) direction[i] = work[i] / left;
                c[rank++] = left;
            }
            var entries = new double[keptRank + rank];
            old.AsSpan(0, inside).CopyTo(entries);
            for (int i = 0; i < rank; i++) entries[keptRank + i] = Math.ScaleB(c[i], exponent);
            columns[j] = entries;
            ranks[j] = keptRank + rank;
        }
        return new TailRotation(g, rank, columns, ranks);
    }
}
