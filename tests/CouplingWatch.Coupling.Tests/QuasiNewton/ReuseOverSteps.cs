using CouplingWatch.Numerics.Secants;

namespace CouplingWatch.Coupling.Tests.QuasiNewton;

/// <summary>Two steps of P1, the second with a shifted right-hand side (tests/reference/fixed-point-iterates/aitken_reuse.txt).</summary>
public class ReuseOverSteps
{
    private const double Tolerance = 1e-5;

    private static MethodSettings Settings(int historySteps) =>
        new() { Relaxation = 0.5, HistorySteps = historySteps, FilterRule = SecantFilter.None, FilterThreshold = 0 };

    private static (IReadOnlyList<FixedPoint.Pass> First, IReadOnlyList<FixedPoint.Pass> Second) TwoSteps(SteppedCoupling coupling)
    {
        var first = FixedPoint.Step(coupling, 0, FixedPoint.P1(), new double[FixedPoint.N], Tolerance);
        return (first, FixedPoint.Step(coupling, 1, FixedPoint.P1(0.05), first[^1].X, Tolerance));
    }

    [Fact]
    public void Without_history_the_second_step_needs_seven_passes()
    {
        var (first, second) = TwoSteps(new SteppedCoupling(FixedPoint.N, Settings(0)));
        AssertResiduals(ReferenceIterates.Block("aitken_reuse.txt", "## two-step test"), first);
        AssertResiduals(ReferenceIterates.Block("aitken_reuse.txt", "## step 2 started from the last x of step 1"), second);
        Assert.Equal(7, second.Count);
    }

    [Fact]
    public void With_one_step_of_history_it_needs_three_and_takes_the_newest_six_columns()
    {
        var (_, second) = TwoSteps(new SteppedCoupling(FixedPoint.N, Settings(1)));
        AssertResiduals(ReferenceIterates.Block("aitken_reuse.txt", "## step 2, IQN-ILS reuse q=1"), second);
        Assert.Equal(3, second.Count);
        Assert.Equal([6, 5, 4, 3, 2, 1], second[0].Report!.Columns.Select(c => c.Iteration));
        Assert.Equal(new ColumnName(1, 0), second[1].Report!.Columns[0]);
        Assert.Equal(6, second[1].Report!.Columns.Count);
    }

    [Fact]
    public void Dropping_the_history_makes_the_second_step_as_long_as_without_history()
    {
        var coupling = new SteppedCoupling(FixedPoint.N, Settings(1));
        var first = FixedPoint.Step(coupling, 0, FixedPoint.P1(), new double[FixedPoint.N], Tolerance);
        coupling.DropHistory();
        Assert.Equal(7, FixedPoint.Step(coupling, 1, FixedPoint.P1(0.05), first[^1].X, Tolerance).Count);
    }

    [Fact]
    public void History_gathered_under_another_method_is_there_when_the_method_changes()
    {
        var coupling = new SteppedCoupling(FixedPoint.N, Settings(1) with { Method = MethodKind.Aitken });
        var first = FixedPoint.Step(coupling, 0, FixedPoint.P1(), new double[FixedPoint.N], Tolerance);
        coupling.Change(Settings(1));
        var second = FixedPoint.Step(coupling, 1, FixedPoint.P1(0.05), first[^1].X, Tolerance);
        Assert.Null(second[0].Report!.Relaxation);
        Assert.True(second.Count <= 4, $"{second.Count} passes");
    }

    [Fact]
    public void A_rejected_attempt_lends_nothing_and_takes_up_no_place()
    {
        var coupling = new SteppedCoupling(FixedPoint.N, Settings(1));
        var first = FixedPoint.Step(coupling, 0, FixedPoint.P1(), new double[FixedPoint.N], Tolerance);
        coupling.BeginStep(1);
        double[] r = [1, 0, 0, 0, 0, 0], x = [0, 1, 0, 0, 0, 0], next = new double[6];
        coupling.Update(r, x, next);
        coupling.Update(x, r, next);
        coupling.EndStep(lendColumns: false);
        Assert.Equal(first.Count - 1, coupling.AvailableColumns);
        coupling.BeginStep(1, attempt: 1);
        coupling.Update(r, x, next);
        Assert.All(coupling.Report!.Columns, c => Assert.Equal(0, c.Step));
    }

    [Fact]
    public void A_step_without_columns_takes_up_a_place_of_the_history()
    {
        var coupling = new SteppedCoupling(FixedPoint.N, Settings(1));
        FixedPoint.Step(coupling, 0, FixedPoint.P1(), new double[FixedPoint.N], Tolerance);
        coupling.BeginStep(1);
        coupling.Observe(new double[FixedPoint.N], new double[FixedPoint.N]);
        coupling.EndStep(lendColumns: true);
        Assert.Equal(0, coupling.AvailableColumns);
        coupling.Change(Settings(2));
        Assert.Equal(6, Math.Min(6, coupling.AvailableColumns));
    }

    private static void AssertResiduals(IReadOnlyList<double[]> rows, IReadOnlyList<FixedPoint.Pass> passes)
    {
        Assert.Equal(rows.Count, passes.Count);
        for (var k = 0; k < rows.Count; k++)
        {
            Assert.Equal(1, passes[k].Norm / rows[k][1], rows[k][1] > 1e-7 ? 1e-5 : 2e-3);
            for (var i = 0; i < FixedPoint.N; i++) Assert.Equal(rows[k][2 + i], passes[k].X[i], 1e-9);
        }
    }
}
