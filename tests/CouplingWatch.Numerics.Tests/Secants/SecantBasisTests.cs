using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Trials;
using CouplingWatch.Numerics.Vectors;
using CsCheck;

namespace CouplingWatch.Numerics.Tests.Secants;

public class SecantBasisTests
{
    private static readonly Gen<(ulong Seed, int Rows, int Count)> Shapes =
        Gen.Select(Gen.ULong, Gen.Int[1, 70], Gen.Int[1, 24], (seed, rows, count) => (seed, rows, count));

    [Fact]
    public void Directions_are_orthonormal_and_give_the_columns_back() => Shapes.Sample(shape =>
    {
        List<double[]> columns = Columns.Leaning(shape.Seed, shape.Rows, shape.Count, 1e-3, 0.4);
        SecantBasis basis = Columns.Basis(columns);
        Assert.True(basis.Rank <= Math.Min(shape.Rows, shape.Count));
        Assert.True(Columns.OrthogonalityLoss(basis) < 5e-15);
        Assert.True(Columns.ReconstructionError(basis, columns) < 1e-14);
    }, iter: 200);

    [Fact]
    public void Long_columns_cross_the_row_blocks_without_loss()
    {
        foreach (int rows in new[] { 1023, 1024, 1025, 2051, 5000 })
        {
            List<double[]> columns = Columns.Leaning(7, rows, 11, 1e-4, 0.5);
            SecantBasis basis = Columns.Basis(columns);
            basis.RemoveOldest(2);
            columns.RemoveRange(0, 2);
            Assert.True(Columns.OrthogonalityLoss(basis) < 5e-15);
            Assert.True(Columns.ReconstructionError(basis, columns) < 1e-14);
        }
    }

    [Fact]
    public void Dropping_at_every_fill_level_equals_a_fresh_factorisation()
    {
        for (int filled = 1; filled <= 12; filled++)
        {
            for (int dropped = 0; dropped <= filled; dropped++)
            {
                List<double[]> columns = Columns.Leaning((ulong)filled, 40, filled, 1e-2, 0.5);
                SecantBasis basis = Columns.Basis(columns);
                basis.RemoveOldest(dropped);
                columns.RemoveRange(0, dropped);
                Matches(basis, columns, 1e-12);
            }
        }
    }

    [Fact]
    public void Removing_any_column_equals_a_fresh_factorisation() =>
        Gen.Select(Gen.ULong, Gen.Int[2, 14], Gen.Int[0, 13]).Where(t => t.Item3 < t.Item2).Sample((seed, count, removed) =>
        {
            List<double[]> columns = Columns.Leaning(seed, 30, count, 1e-2, 0.7);
            SecantBasis basis = Columns.Basis(columns);
            basis.RemoveAt(removed);
            columns.RemoveAt(removed);
            Matches(basis, columns, 1e-12);
        }, iter: 200);

    [Fact]
    public void Thousands_of_steps_leave_the_directions_orthonormal()
    {
        var random = new SplitMix64(11);
        var basis = new SecantBasis(50);
        var columns = new List<double[]>();
        for (int step = 0; step < 4000; step++)
        {
            for (int k = 0; k < 4; k++)
            {
                columns.Add(Columns.Combine((Math.Pow(10, -2 * k), Columns.Normal(ref random, 50)), (1e-3, columns.Count > 0 ? columns[^1] : new double[50])));
                basis.Append(columns[^1]);
            }
            if (step < 5) continue;
            basis.RemoveOldest(4);
            columns.RemoveRange(0, 4);
        }
        Assert.True(Columns.OrthogonalityLoss(basis) < 1e-13);
        Assert.True(Columns.ReconstructionError(basis, columns) < 1e-13);
    }

    [Fact]
    public void More_columns_than_rows_are_taken_and_survive_drops()
    {
        List<double[]> columns = Columns.Normal(5, 6, 20);
        SecantBasis basis = Columns.Basis(columns);
        Assert.Equal((20, 6), (basis.ColumnCount, basis.Rank));
        for (int left = 19; left >= 0; left--)
        {
            basis.RemoveOldest(1);
            columns.RemoveAt(0);
            Assert.Equal((left, Math.Min(left, 6)), (basis.ColumnCount, basis.Rank));
            if (left > 0) Assert.True(Columns.ReconstructionError(basis, columns) < 1e-13);
            Assert.True(Columns.OrthogonalityLoss(basis) < 1e-14);
        }
    }

    [Theory]
    [InlineData(double.NaN)]
    [InlineData(double.PositiveInfinity)]
    [InlineData(double.NegativeInfinity)]
    [InlineData(0.0)]
    public void A_column_without_a_finite_norm_above_zero_changes_nothing(double bad)
    {
        List<double[]> columns = Columns.Normal(2, 20, 4);
        SecantBasis basis = Columns.Basis(columns);
        double[] column = bad == 0 ? new double[20] : Columns.Normal(3, 20, 1)[0];
        column[13] = bad;
        AppendResult result = basis.Append(column);
        Assert.Equal(bad == 0 ? AppendOutcome.Zero : AppendOutcome.NotFinite, result.Outcome);
        Assert.False(result.Taken);
        Matches(basis, columns, 1e-13);
    }

    [Fact]
    public void An_exact_duplicate_is_taken_without_a_new_direction_and_gets_one_when_its_twin_leaves()
    {
        List<double[]> columns = Columns.Normal(4, 25, 3);
        columns.Add((double[])columns[0].Clone());
        SecantBasis basis = Columns.Basis(columns[..3]);
        AppendResult result = basis.Append(columns[3]);
        Assert.Equal(AppendOutcome.Dependent, result.Outcome);
        Assert.Equal((4, 3), (basis.ColumnCount, basis.Rank));
        basis.RemoveOldest(1);
        Assert.Equal((3, 3), (basis.ColumnCount, basis.Rank));
        Matches(basis, columns[1..], 1e-13);
    }

    [Theory]
    [InlineData(1e-2)]
    [InlineData(1e-6)]
    [InlineData(1e-10)]
    [InlineData(1e-13)]
    public void A_near_duplicate_keeps_the_size_of_what_is_new_in_it(double distance)
    {
        List<double[]> columns = Columns.Normal(9, 400, 5);
        SecantBasis basis = Columns.Basis(columns);
        double[] fresh = Columns.Normal(10, 400, 1)[0];
        var projection = new double[5];
        basis.Project(fresh, projection, out double outside);
        AppendResult result = basis.Append(Columns.Combine((1, columns[2]), (distance, fresh)));
        Assert.True(result.Independent);
        Assert.Equal(1, result.NewDirection / (distance * outside), Math.Max(1e-12, 3e-15 / distance));
        Assert.True(Columns.OrthogonalityLoss(basis) < 3e-15);
    }

    [Theory]
    [InlineData(1e-300)]
    [InlineData(1e-160)]
    [InlineData(1e150)]
    [InlineData(1e300)]
    public void The_scale_of_the_columns_does_not_matter(double scale)
    {
        List<double[]> columns = Columns.Leaning(6, 33, 8, 1e-3, 0.5);
        List<double[]> scaled = [.. columns.Select(c => c.Select(v => v * scale).ToArray())];
        SecantBasis plain = Columns.Basis(columns), large = Columns.Basis(scaled);
        plain.RemoveOldest(3);
        large.RemoveOldest(3);
        Assert.Equal(plain.Rank, large.Rank);
        for (int j = 0; j < plain.ColumnCount; j++)
            for (int i = 0; i < plain.ColumnCoefficients(j).Length; i++)
                Assert.Equal(plain.ColumnCoefficients(j)[i], large.ColumnCoefficients(j)[i] / scale, 1e-12 * plain.ColumnNorm(j));
    }

    [Fact]
    public void Columns_graded_over_three_hundred_decades_stay_apart()
    {
        List<double[]> columns = [.. Columns.Normal(8, 30, 7).Select((c, j) => c.Select(v => v * Math.Pow(10, 150 - (50 * j))).ToArray())];
        SecantBasis basis = Columns.Basis(columns);
        Assert.Equal(7, basis.Rank);
        Assert.True(Columns.OrthogonalityLoss(basis) < 3e-15);
        Assert.True(Columns.ReconstructionError(basis, columns) < 1e-14);
    }

    [Fact]
    public void The_norm_outside_the_span_is_right_even_when_tiny()
    {
        List<double[]> columns = Columns.Normal(12, 3000, 6);
        SecantBasis basis = Columns.Basis(columns[..5]);
        var projection = new double[5];
        basis.Project(columns[5], projection, out double outside);
        foreach (double share in new[] { 1e-3, 1e-8, 1e-12 })
        {
            double[] r = Columns.Combine((1, columns[1]), (-2, columns[4]), (share, columns[5]));
            basis.Project(r, projection, out double norm);
            Assert.Equal(1, norm / (share * outside), Math.Max(1e-12, 1e-14 / share));
        }
    }

    [Fact]
    public void A_projection_of_bad_or_empty_vectors_says_so()
    {
        SecantBasis basis = Columns.Basis(Columns.Normal(1, 10, 2));
        var projection = new double[2];
        basis.Project(new double[10], projection, out double zero);
        Assert.Equal((0.0, 0.0, 0.0), (zero, projection[0], projection[1]));
        double[] r = new double[10];
        r[4] = double.PositiveInfinity;
        basis.Project(r, projection, out double bad);
        Assert.True(double.IsNaN(bad) && double.IsNaN(projection[0]) && double.IsNaN(projection[1]));
    }

    [Fact]
    public void Bad_calls_are_refused_with_the_value_and_the_range()
    {
        Assert.Throws<ArgumentOutOfRangeException>(() => new SecantBasis(0));
        var basis = new SecantBasis(3);
        Assert.Contains("3", Assert.Throws<ArgumentException>(() => basis.Append([1, 2])).Message, StringComparison.Ordinal);
        Assert.Throws<ArgumentOutOfRangeException>(() => basis.RemoveOldest(1));
        Assert.Throws<ArgumentOutOfRangeException>(() => basis.RemoveAt(0));
        Assert.Throws<ArgumentException>(() => basis.Project([1, 2], [], out _));
    }

    [Fact]
    public void Clearing_starts_again_with_the_same_memory()
    {
        List<double[]> columns = Columns.Normal(3, 15, 5);
        SecantBasis basis = Columns.Basis(columns);
        basis.Clear();
        Assert.Equal((0, 0), (basis.ColumnCount, basis.Rank));
        foreach (double[] column in columns) basis.Append(column);
        Matches(basis, columns, 1e-13);
    }

    private static void Matches(SecantBasis basis, List<double[]> columns, double tolerance)
    {
        Assert.Equal(columns.Count, basis.ColumnCount);
        Assert.True(Columns.OrthogonalityLoss(basis) < 1e-14);
        if (columns.Count == 0) return;
        Assert.True(Columns.ReconstructionError(basis, columns) < 1e-13);
        SecantBasis fresh = Columns.Basis(columns);
        Assert.Equal(fresh.Rank, basis.Rank);
        double loss = Columns.TriangleDifference(Triangle(basis), Triangle(fresh));
        Assert.True(loss < tolerance, $"{columns.Count} columns: R differs by {loss:E2}");
        for (int j = 0; j < columns.Count; j++) Assert.Equal(1, basis.ColumnNorm(j) / LongVector.Norm(columns[j]), 1e-15);
    }

    private static Numerics.Matrices.SmallMatrix Triangle(SecantBasis basis) =>
        ColumnFilter.Apply(basis, Columns.NewestFirst(basis), SecantFilter.None, 0).Triangle();
}
