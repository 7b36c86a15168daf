using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Tests.Secants;
using CouplingWatch.Numerics.Vectors;
using CsCheck;
using MathNet.Numerics.LinearAlgebra.Double;

namespace CouplingWatch.Numerics.Tests.Matrices;

public class TruncatedSvdTests
{
    private static readonly Gen<(ulong Seed, int Rows, int Columns)> Shapes =
        Gen.Select(Gen.ULong, Gen.Int[1, 25], Gen.Int[1, 25], (seed, rows, columns) => (seed, rows, columns));

    [Fact]
    public void Factors_are_orthonormal_and_multiply_back_for_every_shape() => Shapes.Sample(shape =>
    {
        SmallMatrix a = SmallMatrix.FromColumns(Columns.Normal(shape.Seed, shape.Rows, shape.Columns));
        TruncatedSvd svd = TruncatedSvd.Of(a, 0);
        Assert.Equal(Math.Min(shape.Rows, shape.Columns), svd.Rank);
        NearIdentity(svd.Left.TransposeTimes(svd.Left));
        NearIdentity(svd.Right.TransposeTimes(svd.Right));
        SmallMatrix scaled = svd.Left.Copy();
        for (int k = 0; k < svd.Rank; k++)
            foreach (ref double entry in scaled.Column(k)) entry *= svd.Kept[k];
        SmallMatrix back = scaled.Times(svd.Right.Transpose());
        for (int j = 0; j < a.Columns; j++)
            for (int i = 0; i < a.Rows; i++) Assert.Equal(a[i, j], back[i, j], 1e-13 * svd.Kept[0]);
    }, iter: 100);

    [Fact]
    public void Singular_values_agree_with_an_independent_library() => Shapes.Sample(shape =>
    {
        List<double[]> columns = Columns.Normal(shape.Seed, shape.Rows, shape.Columns);
        double[] expected = DenseMatrix.OfColumnArrays(columns).Svd(false).S.ToArray();
        double[] values = TruncatedSvd.Of(SmallMatrix.FromColumns(columns), 0).SingularValues;
        for (int i = 0; i < expected.Length; i++) Assert.Equal(expected[i], values[i], 1e-13 * expected[0]);
    }, iter: 100);

    [Fact]
    public void Small_singular_values_of_graded_columns_keep_their_digits()
    {
        // A = B·D with B well conditioned: the smallest value is right relative to itself although κ is 1e30.
        List<double[]> columns = [.. Columns.Normal(4, 12, 4).Select((c, j) => c.Select(v => Math.ScaleB(v, -33 * j)).ToArray())];
        double[] values = TruncatedSvd.Of(SmallMatrix.FromColumns(columns), 0).SingularValues;
        // |det R| is the product of the singular values and known to rounding.
        SmallMatrix r = Columns.Basis(columns).Coefficients();
        double logDeterminant = Enumerable.Range(0, 4).Sum(i => Math.Log(r[i, i]));
        Assert.Equal(logDeterminant, values.Sum(Math.Log), 1e-12);
        Assert.InRange(values[3] / Math.ScaleB(1, -99), 0.3, 10);
    }

    [Fact]
    public void The_pseudo_inverse_satisfies_the_four_Penrose_conditions() => Shapes.Sample(shape =>
    {
        // Source: "A generalized inverse for matrices", Proc. Cambridge Philos. Soc. 51 (1955) 406–413 (from memory).
        List<double[]> columns = Columns.Normal(shape.Seed, shape.Rows, shape.Columns);
        columns.Add(Columns.Combine((2, columns[0]), (-1, columns[^1])));
        SmallMatrix a = SmallMatrix.FromColumns(columns);
        SmallMatrix inverse = TruncatedSvd.Of(a, 1e-10).PseudoInverse();
        SmallMatrix left = a.Times(inverse), right = inverse.Times(a);
        double scale = 1e-9;
        Near(left.Times(a), a, scale);
        Near(right.Times(inverse), inverse, scale);
        Near(left.Transpose(), left, scale);
        Near(right.Transpose(), right, scale);
    }, iter: 100);

    [Fact]
    public void The_map_takes_columns_to_their_images()
    {
        SmallMatrix a = SmallMatrix.FromColumns(Columns.Normal(1, 9, 5)), b = SmallMatrix.FromColumns(Columns.Normal(2, 7, 5));
        SmallMatrix map = TruncatedSvd.Of(a, 1e-6).MapTo(b);
        Assert.Equal((7, 9), (map.Rows, map.Columns));
        Near(map.Times(a), b, 1e-12);
    }

    [Fact]
    public void Directions_below_the_cut_are_not_used()
    {
        SmallMatrix a = SmallMatrix.FromColumns([[1, 0, 0], [0, 1e-3, 0], [0, 0, 1e-8]]);
        TruncatedSvd svd = TruncatedSvd.Of(a, 1e-6);
        Assert.Equal(2, svd.Rank);
        Assert.Equal([1, 1e-3, 1e-8], svd.SingularValues);
        Assert.Equal([2, 3e3, 0], svd.Solve([2, 3, 4]));
    }

    [Fact]
    public void A_zero_matrix_has_rank_zero_and_solves_to_zero()
    {
        TruncatedSvd svd = TruncatedSvd.Of(new SmallMatrix(3, 2), 1e-6);
        Assert.Equal(0, svd.Rank);
        Assert.Equal([0, 0], svd.Solve([1, 2, 3]));
    }

    [Fact]
    public void Bad_calls_are_refused()
    {
        Assert.Throws<ArgumentException>(() => TruncatedSvd.Of(SmallMatrix.FromColumns([[double.NaN]]), 0));
        Assert.Throws<ArgumentException>(() => TruncatedSvd.Of(new SmallMatrix(0, 3), 0));
        Assert.Throws<ArgumentOutOfRangeException>(() => TruncatedSvd.Of(new SmallMatrix(1, 1), 1));
    }

    [Fact]
    public void The_space_of_many_long_vectors_is_found_with_its_cut()
    {
        List<double[]> vectors = Columns.Normal(5, 3000, 4);
        for (int j = 0; j < 30; j++) vectors.Add(Columns.Combine((Math.Sin(j + 1), vectors[0]), (Math.Cos(3 * j), vectors[1]), (1, vectors[2])));
        vectors.Add(Columns.Combine((1, vectors[0]), (1e-11, Columns.Normal(6, 3000, 1)[0])));
        vectors.Add(new double[3000]);
        ColumnSpace space = ColumnSpace.Of(vectors, 1e-9);
        Assert.Equal(4, space.Dimension);
        for (int i = 0; i < 4; i++)
            for (int j = 0; j < 4; j++) Assert.Equal(i == j ? 1 : 0, LongVector.Dot(space.Direction(i), space.Direction(j)), 1e-13);
        double[] coordinates = space.Coordinates(vectors[3]);
        Assert.Equal(1, LongVector.Norm(coordinates) / LongVector.Norm(vectors[3]), 1e-12);
    }

    private static void NearIdentity(SmallMatrix m) => Near(m, SmallMatrix.Identity(m.Rows), 1e-13);

    private static void Near(SmallMatrix a, SmallMatrix b, double tolerance)
    {
        Assert.Equal((b.Rows, b.Columns), (a.Rows, a.Columns));
        double largest = 0;
        for (int j = 0; j < a.Columns; j++) largest = Math.Max(largest, LongVector.LargestMagnitude(b.Column(j)));
        for (int j = 0; j < a.Columns; j++)
            for (int i = 0; i < a.Rows; i++) Assert.Equal(b[i, j], a[i, j], tolerance * Math.Max(1, largest));
    }
}
