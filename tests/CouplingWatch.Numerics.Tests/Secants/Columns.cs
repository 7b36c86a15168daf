using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Trials;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Tests.Secants;

/// <summary>Columns for tests, and what must hold of a basis made of them.</summary>
internal static class Columns
{
    internal static double[] Normal(ref SplitMix64 random, int rows)
    {
        var column = new double[rows];
        for (int i = 0; i < rows; i++) column[i] = random.NextNormal();
        return column;
    }

    internal static List<double[]> Normal(ulong seed, int rows, int count)
    {
        var random = new SplitMix64(seed);
        var columns = new List<double[]>();
        for (int j = 0; j < count; j++) columns.Add(Normal(ref random, rows));
        return columns;
    }

    /// <summary>Columns like a coupled run leaves them: falling in size and leaning on one another.</summary>
    internal static List<double[]> Leaning(ulong seed, int rows, int count, double lean, double fall)
    {
        var random = new SplitMix64(seed);
        var columns = new List<double[]>();
        double size = 1;
        for (int j = 0; j < count; j++)
        {
            double[] column = Normal(ref random, rows);
            if (j > 0)
                for (int i = 0; i < rows; i++) column[i] = (columns[j - 1][i] / LongVector.Norm(columns[j - 1])) + (lean * column[i]);
            double norm = LongVector.Norm(column);
            for (int i = 0; i < rows; i++) column[i] *= size / norm;
            columns.Add(column);
            size *= fall;
        }
        return columns;
    }

    internal static double[] Combine(params (double Factor, double[] Column)[] parts)
    {
        var result = new double[parts[0].Column.Length];
        foreach (var (factor, column) in parts) LongVector.AddScaled(result, factor, column);
        return result;
    }

    internal static SecantBasis Basis(IReadOnlyList<double[]> columns)
    {
        var basis = new SecantBasis(columns[0].Length, 1);
        foreach (double[] column in columns) basis.Append(column);
        return basis;
    }

    internal static int[] NewestFirst(SecantBasis basis) => [.. Enumerable.Range(0, basis.ColumnCount).Reverse()];

    /// <summary>Largest entry of |QᵀQ − I|.</summary>
    internal static double OrthogonalityLoss(SecantBasis basis)
    {
        double worst = 0;
        for (int i = 0; i < basis.Rank; i++)
            for (int j = 0; j <= i; j++)
                worst = Math.Max(worst, Math.Abs(LongVector.Dot(basis.Direction(i), basis.Direction(j)) - (i == j ? 1 : 0)));
        return worst;
    }

    /// <summary>Largest ‖v − Qc‖/‖v‖ over the columns.</summary>
    internal static double ReconstructionError(SecantBasis basis, IReadOnlyList<double[]> columns)
    {
        Assert.Equal(columns.Count, basis.ColumnCount);
        double worst = 0;
        for (int j = 0; j < columns.Count; j++)
        {
            double norm = LongVector.Norm(columns[j]);
            int exponent = Math.ILogB(norm);
            double[] rest = [.. columns[j].Select(v => Math.ScaleB(v, -exponent))];
            ReadOnlySpan<double> c = basis.ColumnCoefficients(j);
            for (int i = 0; i < c.Length; i++) LongVector.AddScaled(rest, -Math.ScaleB(c[i], -exponent), basis.Direction(i));
            worst = Math.Max(worst, LongVector.Norm(rest) / Math.ScaleB(norm, -exponent));
        }
        return worst;
    }

    /// <summary>Largest difference of two triangles, column by column relative to the column's norm.</summary>
    internal static double TriangleDifference(SmallMatrix a, SmallMatrix b)
    {
        Assert.Equal(a.Columns, b.Columns);
        double worst = 0;
        for (int j = 0; j < a.Columns; j++)
        {
            double norm = LongVector.Norm(b.Column(j));
            for (int i = 0; i < a.Rows; i++) worst = Math.Max(worst, Math.Abs(a[i, j] - b[i, j]) / norm);
        }
        return worst;
    }
}
