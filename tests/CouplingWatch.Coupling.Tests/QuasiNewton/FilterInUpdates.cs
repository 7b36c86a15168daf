using CouplingWatch.Numerics.Secants;
using CsCheck;

namespace CouplingWatch.Coupling.Tests.QuasiNewton;

public class FilterInUpdates
{
    /// <summary>A residual path whose columns are the given multiples of unit vectors, newest last.</summary>
    private static SteppedCoupling AfterColumns(MethodSettings settings, params (int Direction, double Size)[] columns)
    {
        var coupling = new SteppedCoupling(6, settings);
        double[] r = [1, 1, 1, 1, 1, 1], output = new double[6], next = new double[6];
        coupling.BeginStep(0);
        coupling.Update(r, output, next);
        foreach (var (direction, size) in columns)
        {
            r[direction] += size;
            output[direction] += size / 2;
            coupling.Update(r, output, next);
        }
        return coupling;
    }

    [Fact]
    public void Pivot_ratio_leaves_the_small_newest_column_out_and_own_norm_keeps_it()
    {
        (int, double)[] shrinking = [(0, 1), (1, 0.1), (2, 1e-3)];
        var pivot = AfterColumns(new MethodSettings { FilterRule = SecantFilter.PivotRatio, FilterThreshold = 1e-2 }, shrinking);
        Assert.Equal([new ColumnName(0, 2)], pivot.Report!.Left);
        Assert.Equal([new ColumnName(0, 1), new ColumnName(0, 0)], pivot.Report.Columns);
        var own = AfterColumns(new MethodSettings { FilterRule = SecantFilter.OwnNorm, FilterThreshold = 1e-2 }, shrinking);
        Assert.Empty(own.Report!.Left);
        Assert.Equal(3, own.Report.Columns.Count);
    }

    [Fact]
    public void With_no_column_kept_the_update_is_a_relaxation()
    {
        var coupling = new SteppedCoupling(2, new MethodSettings { Relaxation = 0.25 });
        double[] next = new double[2];
        coupling.BeginStep(0);
        coupling.Update([1, 2], [3, 4], next);
        Assert.Equal([2.25, 2.5], next);
        Assert.Equal(0.25, coupling.Report!.Relaxation);
    }

    [Fact]
    public void The_promise_of_the_report_is_what_the_coefficients_leave_of_the_residual()
    {
        Gen.Double[-1, 1].Array[5].Array[4].Sample(vectors =>
        {
            var coupling = new SteppedCoupling(5, new MethodSettings { FilterThreshold = 0 });
            var next = new double[5];
            coupling.BeginStep(0);
            foreach (var r in vectors) coupling.Update(r, r, next);
            var report = coupling.Report!;
            var left = (double[])vectors[^1].Clone();
            for (var c = 0; c < report.Columns.Count; c++)
            {
                var k = report.Columns[c].Iteration;
                for (var i = 0; i < 5; i++) left[i] += report.Coefficients[c] * (vectors[k + 1][i] - vectors[k][i]);
            }
            return Math.Abs(FixedPoint.Norm(left) - report.OutsideShare!.Value * FixedPoint.Norm(vectors[^1])) < 1e-7;
        }, iter: 200);
    }

    [Fact]
    public void A_residual_that_is_not_finite_gives_a_vector_that_is_not_finite_and_no_exception()
    {
        foreach (var method in Enum.GetValues<MethodKind>())
        {
            var coupling = new SteppedCoupling(2, new MethodSettings { Method = method });
            double[] next = new double[2];
            coupling.BeginStep(0);
            coupling.Update([1, 2], [3, 4], next);
            coupling.Update([double.NaN, 2], [3, 4], next);
            Assert.Contains(next, v => !double.IsFinite(v));
        }
    }

    [Fact]
    public void Wrong_lengths_settings_out_of_range_and_calls_out_of_order_are_refused_by_name()
    {
        var coupling = new SteppedCoupling(2, new MethodSettings());
        var next = new double[2];
        Assert.Throws<InvalidOperationException>(() => coupling.Update([1, 2], [1, 2], next));
        Assert.Throws<InvalidOperationException>(() => coupling.EndStep(true));
        coupling.BeginStep(0);
        Assert.Contains("3 entries", Assert.Throws<ArgumentException>(() => coupling.Update([1, 2, 3], [1, 2], next)).Message, StringComparison.Ordinal);
        Assert.Throws<InvalidOperationException>(() => coupling.Change(new MethodSettings()));
        Assert.Throws<InvalidOperationException>(coupling.DropHistory);
        Assert.Throws<ArgumentOutOfRangeException>(() => new SteppedCoupling(2, new MethodSettings { Relaxation = 0 }));
        Assert.Throws<ArgumentOutOfRangeException>(() => new SteppedCoupling(2, new MethodSettings { FilterThreshold = 1 }));
        Assert.Throws<ArgumentOutOfRangeException>(() => new SteppedCoupling(2, new MethodSettings { HistorySteps = -1 }));
    }
}
