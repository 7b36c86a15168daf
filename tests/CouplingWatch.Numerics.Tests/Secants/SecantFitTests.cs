using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Trials;
using CouplingWatch.Numerics.Vectors;
using CsCheck;

namespace CouplingWatch.Numerics.Tests.Secants;

public class SecantFitTests
{
    private static readonly Gen<(ulong Seed, int Rows, int Count)> Shapes =
        Gen.Select(Gen.ULong, Gen.Int[2, 50], Gen.Int[1, 12], (seed, rows, count) => (seed, rows, count));

    [Fact]
    public void What_the_kept_columns_leave_is_orthogonal_to_them_and_of_the_size_stated() => Shapes.Sample(shape =>
    {
        List<double[]> columns = Columns.Leaning(shape.Seed, shape.Rows, shape.Count, 0.1, 0.5);
        double[] r = Columns.Normal(shape.Seed + 1, shape.Rows, 1)[0];
        var (fit, kept) = Solve(columns, r, 0.05, 0);
        var rest = (double[])r.Clone();
        for (int j = 0; j < kept.Length; j++) LongVector.AddScaled(rest, fit.Alpha[j], columns[kept[j]]);
        foreach (int j in kept) Assert.Equal(0, LongVector.Dot(rest, columns[j]) / LongVector.Norm(columns[j]) / LongVector.Norm(r), 1e-12);
        Assert.Equal(LongVector.Norm(rest) / LongVector.Norm(r), fit.UncoveredShare, 1e-12);
        Assert.Equal(LongVector.Norm(r), fit.ResidualNorm, 1e-12 * LongVector.Norm(r));
    }, iter: 300);

    [Fact]
    public void The_shares_of_live_reused_and_uncovered_add_to_one() => Shapes.Sample(shape =>
    {
        List<double[]> columns = Columns.Leaning(shape.Seed, shape.Rows, shape.Count, 0.1, 0.5);
        double[] r = Columns.Normal(shape.Seed + 1, shape.Rows, 1)[0];
        var (fit, kept) = Solve(columns, r, 0.05, 1);
        Assert.Equal(1, fit.LiveShare + fit.HistoryShare + (fit.UncoveredShare * fit.UncoveredShare), 1e-12);
        double cosine = LongVector.Dot(columns[kept[0]], r) / LongVector.Norm(columns[kept[0]]) / LongVector.Norm(r);
        Assert.Equal(cosine * cosine, fit.LiveShare, 1e-12);
    }, iter: 300);

    [Fact]
    public void A_covered_residual_is_seen_as_covered_down_to_rounding()
    {
        List<double[]> columns = Columns.Normal(21, 2000, 6);
        double[] r = Columns.Combine((1, columns[0]), (-3, columns[4]), (1e-11, columns[5]));
        var (fit, _) = Solve(columns[..5], r, 0, 5);
        Assert.InRange(fit.UncoveredShare, 0.9e-11 / 4, 1.1e-11);
        Assert.Equal(-1, fit.Alpha[4], 1e-10);
        Assert.Equal(3, fit.Alpha[0], 1e-10);
    }

    [Fact]
    public void With_no_column_everything_is_uncovered()
    {
        var basis = new SecantBasis(5);
        basis.Project([1, 2, 3, 4, 5], [], out double outside);
        SecantFit fit = SecantFit.Solve(ColumnFilter.Apply(basis, [], SecantFilter.OwnNorm, 0.1), [], outside);
        Assert.Empty(fit.Alpha);
        Assert.Equal(1, fit.UncoveredShare, 1e-15);
    }

    [Fact]
    public void Coefficients_do_not_depend_on_the_order_of_arrival()
    {
        List<double[]> columns = Columns.Normal(31, 40, 5);
        double[] r = Columns.Normal(32, 40, 1)[0];
        double[] forward = Solve(columns, r, 0, 0).Fit.Alpha;
        columns.Reverse();
        double[] backward = Solve(columns, r, 0, 0).Fit.Alpha;
        for (int j = 0; j < 5; j++) Assert.Equal(forward[j], backward[4 - j], 1e-12);
    }

    private static (SecantFit Fit, int[] Kept) Solve(List<double[]> columns, double[] r, double threshold, int live)
    {
        SecantBasis basis = Columns.Basis(columns);
        FilterOutcome filter = ColumnFilter.Apply(basis, Columns.NewestFirst(basis), SecantFilter.OwnNorm, threshold);
        var projection = new double[basis.Rank];
        basis.Project(r, projection, out double outside);
        return (SecantFit.Solve(filter, projection, outside, live), filter.Kept.ToArray());
    }
}
