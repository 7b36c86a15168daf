using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Tests.Secants;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Tests.Matrices;

public class SmallMatrixTests
{
    [Fact]
    public void A_packed_triangle_is_unpacked_by_columns()
    {
        SmallMatrix r = SmallMatrix.FromPackedTriangle([1, 2, 3, 4, 5, 6]);
        Assert.Equal([1, 0, 0], r.Column(0).ToArray());
        Assert.Equal([2, 3, 0], r.Column(1).ToArray());
        Assert.Equal([4, 5, 6], r.Column(2).ToArray());
        Assert.Equal(0, SmallMatrix.FromPackedTriangle([]).Columns);
        Assert.Throws<ArgumentException>(() => SmallMatrix.FromPackedTriangle([1, 2]));
    }

    [Fact]
    public void Products_agree_with_one_another()
    {
        SmallMatrix a = SmallMatrix.FromColumns(Columns.Normal(1, 7, 4)), b = SmallMatrix.FromColumns(Columns.Normal(2, 7, 3));
        SmallMatrix direct = a.TransposeTimes(b), viaTranspose = a.Transpose().Times(b);
        for (int i = 0; i < 4; i++)
            for (int j = 0; j < 3; j++) Assert.Equal(direct[i, j], viaTranspose[i, j], 1e-14);
        Assert.Equal(a.Column(2).ToArray(), a.Times([0, 0, 1, 0]));
    }

    [Fact]
    public void Sizes_that_do_not_fit_and_indices_outside_are_refused()
    {
        var a = new SmallMatrix(2, 3);
        Assert.Throws<ArgumentException>(() => a.Times(a));
        Assert.Throws<ArgumentException>(() => a.TransposeTimes(new SmallMatrix(3, 1)));
        Assert.Throws<ArgumentOutOfRangeException>(() => a[2, 0]);
        Assert.Throws<ArgumentOutOfRangeException>(() => a[0, 3]);
        Assert.Throws<ArgumentException>(() => SmallMatrix.FromColumns([[1], [1, 2]]));
    }

    [Fact]
    public void A_growing_factorisation_reduces_and_solves()
    {
        List<double[]> columns = Columns.Normal(3, 9, 5);
        var factor = new GrowingQr(9);
        foreach (double[] column in columns)
        {
            factor.Offer(column);
            factor.Keep();
        }
        double[] y = Columns.Combine((1, columns[0]), (-2, columns[3]));
        double norm = LongVector.Norm(y);
        factor.Reflect(y);
        Assert.Equal(norm, LongVector.Norm(y), 1e-13);
        Assert.Equal(0, LongVector.Norm(y.AsSpan(5)), 1e-13);
        factor.SolveTriangle(y.AsSpan(0, 5));
        double[] expected = [1, 0, 0, -2, 0];
        for (int j = 0; j < 5; j++) Assert.Equal(expected[j], y[j], 1e-13);
    }

    [Fact]
    public void Keeping_without_an_offer_is_refused()
    {
        var factor = new GrowingQr(2);
        Assert.Throws<InvalidOperationException>(factor.Keep);
        factor.Offer([1, 1]);
        factor.Keep();
        Assert.Throws<InvalidOperationException>(factor.Keep);
        Assert.Throws<ArgumentException>(() => factor.Offer([1, 2, 3]));
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(7)]
    [InlineData(8)]
    [InlineData(33)]
    [InlineData(1000)]
    public void Long_sums_agree_with_plain_ones_at_every_length(int length)
    {
        double[] a = [.. Enumerable.Range(0, length).Select(i => Math.Sin(i + 1))], b = [.. Enumerable.Range(0, length).Select(i => Math.Cos(2 * i))];
        Assert.Equal(a.Zip(b, (x, y) => x * y).Sum(), LongVector.Dot(a, b), 1e-12);
        Assert.Equal(Math.Sqrt(a.Sum(x => x * x)), LongVector.Norm(a), 1e-12);
        double[] c = (double[])b.Clone(), d = (double[])a.Clone();
        LongVector.AddScaled(c, 2.5, a);
        for (int i = 0; i < length; i++) Assert.Equal(b[i] + (2.5 * a[i]), c[i], 1e-15 * 4);
        LongVector.Rotate(d, c, 0.6, 0.8);
        for (int i = 0; i < length; i++) Assert.Equal((0.6 * a[i]) + (0.8 * (b[i] + (2.5 * a[i]))), d[i], 1e-14);
    }

    [Fact]
    public void Norms_survive_overflow_underflow_and_bad_entries()
    {
        Assert.Equal(5e200, LongVector.Norm([3e200, 4e200]), 1e187);
        Assert.Equal(5e-200, LongVector.Norm([3e-200, 4e-200]), 1e-213);
        Assert.Equal(double.PositiveInfinity, LongVector.Norm([1, double.NegativeInfinity]));
        Assert.True(double.IsNaN(LongVector.Norm([double.PositiveInfinity, double.NaN])));
        Assert.Equal(0, LongVector.Norm([0, 0]));
        Assert.Equal(double.Epsilon, LongVector.Norm([double.Epsilon]));
    }
}
