using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Trials;
using CouplingWatch.Numerics.Vectors;
using CsCheck;
using MathNet.Numerics.LinearAlgebra.Double;

namespace CouplingWatch.Numerics.Tests.Secants;

public class ColumnFilterTests
{
    private static readonly double[] Thresholds = [1e-10, 1e-6, 1e-4, 1e-2, 0.1, 0.4];

    private static readonly Gen<(ulong Seed, int Rows, int Count, SecantFilter Rule, double Threshold)> Cases = Gen.Select(
        Gen.ULong, Gen.Int[2, 30], Gen.Int[1, 16], Gen.OneOf<SecantFilter>(Gen.Const(SecantFilter.OwnNorm), Gen.Const(SecantFilter.PivotRatio)), Gen.Int[0, Thresholds.Length - 1],
        (seed, rows, count, rule, place) => (seed, rows, count, rule, Thresholds[place]));

    /// <summary>The written rule, done literally on the long columns with a fresh factorisation every time.</summary>
    [Fact]
    public void The_small_matrix_decides_as_the_long_columns_would() => Cases.Sample(c =>
    {
        List<double[]> columns = Awkward(c.Seed, c.Rows, c.Count);
        SecantBasis basis = Columns.Basis(columns);
        FilterOutcome outcome = ColumnFilter.Apply(basis, Columns.NewestFirst(basis), c.Rule, c.Threshold);
        var (kept, closest) = Literally(columns, c.Rows, c.Rule, c.Threshold);
        if (closest < 1e-6) return; // a decision within rounding of the threshold may fall either way
        Assert.Equal(kept, outcome.Kept.ToArray());
    }, iter: 2000);

    [Fact]
    public void The_triangle_is_that_of_the_kept_columns() => Cases.Sample(c =>
    {
        List<double[]> columns = Awkward(c.Seed, c.Rows, c.Count);
        SecantBasis basis = Columns.Basis(columns);
        FilterOutcome outcome = ColumnFilter.Apply(basis, Columns.NewestFirst(basis), c.Rule, c.Threshold);
        SmallMatrix r = outcome.Triangle();
        for (int j = 0; j < r.Columns; j++)
        {
            double[] own = columns[outcome.Kept[j]];
            Assert.True(r[j, j] > 0);
            Assert.Equal(1, LongVector.Norm(r.Column(j)) / LongVector.Norm(own), 1e-13);
            for (int i = 0; i < j; i++)
            {
                Assert.Equal(0, r[j, i]);
                double inner = LongVector.Dot(columns[outcome.Kept[i]], own) / LongVector.Norm(columns[outcome.Kept[i]]) / LongVector.Norm(own);
                double small = LongVector.Dot(r.Column(i), r.Column(j)) / LongVector.Norm(r.Column(i)) / LongVector.Norm(r.Column(j));
                Assert.Equal(inner, small, 1e-13);
            }
        }
    }, iter: 500);

    [Fact]
    public void Scaling_every_column_alike_changes_no_decision() => Cases.Sample(c =>
    {
        List<double[]> columns = Awkward(c.Seed, c.Rows, c.Count);
        int[] kept = Keep(columns, c.Rule, c.Threshold);
        Assert.Equal(kept, Keep([.. columns.Select(v => v.Select(x => x * 1024).ToArray())], c.Rule, c.Threshold));
    }, iter: 300);

    [Fact]
    public void Under_own_norm_scaling_single_columns_changes_no_decision() => Cases.Sample(c =>
    {
        List<double[]> columns = Awkward(c.Seed, c.Rows, c.Count);
        var random = new SplitMix64(c.Seed);
        List<double[]> scaled = [.. columns.Select(v => { double factor = Math.ScaleB(1, random.NextInt(60) - 30); return v.Select(x => x * factor).ToArray(); })];
        Assert.Equal(Keep(columns, SecantFilter.OwnNorm, c.Threshold), Keep(scaled, SecantFilter.OwnNorm, c.Threshold));
    }, iter: 300);

    [Fact]
    public void The_newest_column_always_stays_under_own_norm() => Cases.Sample(c =>
    {
        List<double[]> columns = Awkward(c.Seed, c.Rows, c.Count);
        Assert.Equal(columns.Count - 1, Keep(columns, SecantFilter.OwnNorm, c.Threshold)[0]);
    }, iter: 300);

    [Fact]
    public void Only_as_many_columns_as_rows_are_looked_at()
    {
        SecantBasis basis = Columns.Basis(Columns.Normal(3, 6, 9));
        FilterOutcome outcome = ColumnFilter.Apply(basis, Columns.NewestFirst(basis), SecantFilter.OwnNorm, 1e-8);
        Assert.Equal([8, 7, 6, 5, 4, 3], outcome.Kept.ToArray());
        Assert.Empty(outcome.Left.ToArray());
        Assert.Equal(6, outcome.Considered);
        Assert.Equal([ColumnFate.Beyond, ColumnFate.Beyond, ColumnFate.Beyond], outcome.Columns[6..].ToArray().Select(e => e.Fate));
    }

    [Theory]
    [InlineData(SecantFilter.OwnNorm)]
    [InlineData(SecantFilter.PivotRatio)]
    [InlineData(SecantFilter.None)]
    public void An_exact_duplicate_leaves_even_at_threshold_zero(SecantFilter rule)
    {
        List<double[]> columns = Columns.Normal(3, 20, 3);
        columns.Insert(0, Columns.Combine((2, columns[2])));
        SecantBasis basis = Columns.Basis(columns);
        FilterOutcome outcome = ColumnFilter.Apply(basis, Columns.NewestFirst(basis), rule, 0);
        Assert.Equal([3, 2, 1], outcome.Kept.ToArray());
        Assert.Equal([0], outcome.Left.ToArray());
    }

    [Fact]
    public void A_column_that_looks_dependent_only_because_of_an_offender_gets_its_chance()
    {
        // Newest first: a, then b ≈ a, then c ≈ b − a: c lies along the difference that b brought, until b is left out.
        double[] a = [1, 0, 0], b = [1, 1e-5, 0], c = [0, 1e-5, 1e-9];
        SecantBasis basis = Columns.Basis([c, b, a]);
        FilterOutcome outcome = ColumnFilter.Apply(basis, [2, 1, 0], SecantFilter.OwnNorm, 1e-3);
        Assert.Equal([2, 0], outcome.Kept.ToArray());
        Assert.Equal(1e-5, outcome.Columns[1].Share, 1e-9);
        Assert.Equal(1, outcome.Columns[2].Share, 1e-9);
    }

    [Fact]
    public void Shares_tell_which_side_of_the_threshold_a_column_fell() => Cases.Sample(c =>
    {
        List<double[]> columns = Awkward(c.Seed, c.Rows, c.Count);
        SecantBasis basis = Columns.Basis(columns);
        foreach (ColumnEntry entry in ColumnFilter.Apply(basis, Columns.NewestFirst(basis), c.Rule, c.Threshold).Columns)
        {
            if (entry.Fate == ColumnFate.Kept) Assert.True(entry.Share >= c.Threshold * (1 - 1e-9));
            if (entry.Fate == ColumnFate.Left) Assert.True(entry.Share < Math.Max(c.Threshold, 1e-13));
            Assert.Equal(entry.Fate == ColumnFate.Beyond, double.IsNaN(entry.Share));
        }
    }, iter: 300);

    [Fact]
    public void Bad_calls_are_refused()
    {
        SecantBasis basis = Columns.Basis(Columns.Normal(3, 6, 2));
        Assert.Throws<ArgumentOutOfRangeException>(() => ColumnFilter.Apply(basis, [2], SecantFilter.None, 0));
        Assert.Throws<ArgumentOutOfRangeException>(() => ColumnFilter.Apply(basis, [1, 0], SecantFilter.OwnNorm, 1));
        Assert.Throws<ArgumentOutOfRangeException>(() => ColumnFilter.Apply(basis, [1, 0], SecantFilter.OwnNorm, double.NaN));
        Assert.Throws<ArgumentException>(() => ColumnFilter.Apply(basis, [1, 1], SecantFilter.OwnNorm, 0.1));
    }

    private static int[] Keep(List<double[]> columns, SecantFilter rule, double threshold)
    {
        SecantBasis basis = Columns.Basis(columns);
        return ColumnFilter.Apply(basis, Columns.NewestFirst(basis), rule, threshold).Kept.ToArray();
    }

    /// <summary>Columns of all sizes, some nearly and some exactly combinations of others.</summary>
    private static List<double[]> Awkward(ulong seed, int rows, int count)
    {
        var random = new SplitMix64(seed);
        List<double[]> columns = [];
        for (int j = 0; j < count; j++)
        {
            double[] column = Columns.Normal(ref random, rows);
            if (j > 0 && random.NextDouble() < 0.6)
                column = Columns.Combine((1, columns[random.NextInt(j)]), (Math.Pow(10, -12 * random.NextDouble()), column));
            columns.Add(Columns.Combine((Math.Pow(10, -6 * random.NextDouble()), column)));
        }
        return columns;
    }

    private static (int[] Kept, double Closest) Literally(List<double[]> columns, int rows, SecantFilter rule, double threshold)
    {
        List<int> still = [.. Enumerable.Range(0, columns.Count).Reverse().Take(rows)];
        double closest = double.PositiveInfinity;
        while (true)
        {
            // Scaled to unit columns so that a column's own size does not blur its pivot, then scaled back.
            double[] norms = [.. still.Select(j => LongVector.Norm(columns[j]))];
            double[] pivots = Pivots(still, columns, norms, rows);
            double largest = pivots.Max();
            double Ratio(int i) => rule == SecantFilter.OwnNorm ? pivots[i] / norms[i] : pivots[i] / largest;
            for (int i = 0; i < pivots.Length; i++) closest = Math.Min(closest, Math.Abs((Ratio(i) / threshold) - 1));
            int offender = Enumerable.Range(0, pivots.Length).Cast<int?>().FirstOrDefault(i => Ratio(i!.Value) < threshold || pivots[i.Value] < 1e-15 * norms[i.Value]) ?? -1;
            if (offender < 0) return ([.. still], closest);
            still.RemoveAt(offender);
        }
    }

    private static double[] Pivots(List<int> still, List<double[]> columns, double[] norms, int rows)
    {
        var v = DenseMatrix.OfColumnArrays(still.Select((j, i) => columns[j].Select(x => x / norms[i]).ToArray()));
        var r = v.QR(MathNet.Numerics.LinearAlgebra.Factorization.QRMethod.Full).R;
        return [.. Enumerable.Range(0, still.Count).Select(i => i < rows ? Math.Abs(r[i, i]) * norms[i] : 0)];
    }
}
