using CouplingWatch.Coupling.Surrogates;
using CouplingWatch.Numerics.Secants;

namespace CouplingWatch.Coupling.Tests.Surrogates;

/// <summary>dx̃ = W R⁻¹Qᵀ dr + J_s (I − QQᵀ) dr: what it becomes for J_s = 0, J_s = J_prev and the exact J_s.</summary>
public class SurrogateIdentities
{
    private static MethodSettings Settings(MethodKind method, int historySteps = 0) =>
        new() { Method = method, Relaxation = 1, HistorySteps = historySteps, FilterRule = SecantFilter.None, FilterThreshold = 0 };

    private sealed class Nothing : ISurrogate
    {
        public int Add(ReadOnlySpan<double> residualChange, Span<double> outputChange) => 0;
    }

    /// <summary>J_prev of one earlier step, applied with a method of its own that knows only that step.</summary>
    private sealed class JacobianOf(SteppedCoupling earlier) : ISurrogate
    {
        public int Add(ReadOnlySpan<double> residualChange, Span<double> outputChange)
        {
            double[] r = new double[residualChange.Length], zero = new double[r.Length], next = new double[r.Length];
            for (var i = 0; i < r.Length; i++) r[i] = -residualChange[i];
            earlier.BeginStep(99);
            earlier.Update(r, zero, next); // next = 0 + W c with V c ≈ −r = dr
            earlier.EndStep(lendColumns: false);
            for (var i = 0; i < r.Length; i++) outputChange[i] += next[i];
            return 1;
        }
    }

    private static void AssertSame(IReadOnlyList<FixedPoint.Pass> a, IReadOnlyList<FixedPoint.Pass> b, double tolerance)
    {
        Assert.Equal(a.Count, b.Count);
        for (var k = 0; k < a.Count; k++)
            for (var i = 0; i < a[k].X.Length; i++) Assert.Equal(a[k].X[i], b[k].X[i], tolerance);
    }

    [Fact]
    public void With_a_surrogate_of_zero_it_is_iqn_ils_whose_first_relaxation_is_one()
    {
        var ils = FixedPoint.Step(new SteppedCoupling(FixedPoint.N, Settings(MethodKind.IqnIls)), 0, FixedPoint.P1(), new double[FixedPoint.N], 1e-9);
        var ilsm = FixedPoint.Step(new SteppedCoupling(FixedPoint.N, Settings(MethodKind.IqnIlsm), surrogate: new Nothing()), 0, FixedPoint.P1(), new double[FixedPoint.N], 1e-9);
        AssertSame(ils, ilsm, 1e-11);
        Assert.Equal(1, ilsm[0].Report!.Surrogate!.Covered, 1e-12);
        Assert.Equal(ilsm[3].Report!.OutsideShare!.Value, ilsm[3].Report!.Surrogate!.Covered, 1e-9);
    }

    [Fact]
    public void With_the_jacobian_of_the_step_before_it_is_the_multi_step_method()
    {
        const double tolerance = 5e-4;
        var multi = new SteppedCoupling(FixedPoint.N, Settings(MethodKind.Mvqn, 1));
        var first = FixedPoint.Step(multi, 0, FixedPoint.P1(), new double[FixedPoint.N], tolerance);
        var expected = FixedPoint.Step(multi, 1, FixedPoint.P1(0.05), first[^1].X, tolerance);

        var earlier = new SteppedCoupling(FixedPoint.N, Settings(MethodKind.IqnIls, 1));
        FixedPoint.Step(earlier, 0, FixedPoint.P1(), new double[FixedPoint.N], tolerance);
        var ilsm = new SteppedCoupling(FixedPoint.N, Settings(MethodKind.IqnIlsm), surrogate: new JacobianOf(earlier));
        AssertSame(expected, FixedPoint.Step(ilsm, 1, FixedPoint.P1(0.05), first[^1].X, tolerance), 1e-10);
    }

    [Fact]
    public void The_exact_linear_pass_as_surrogate_solves_a_linear_problem_in_one_update()
    {
        var exact = new LinearPassSurrogate(FixedPoint.N, (dx, output) =>
        {
            var zero = FixedPoint.Linear(new double[FixedPoint.N]);
            var moved = FixedPoint.Linear(dx.ToArray());
            for (var i = 0; i < output.Length; i++) output[i] = moved[i] - zero[i];
        }, tolerance: 1e-13);
        var passes = FixedPoint.Step(new SteppedCoupling(FixedPoint.N, Settings(MethodKind.IqnIlsm), surrogate: exact), 0, FixedPoint.Linear, new double[FixedPoint.N], 1e-10);
        Assert.Equal(2, passes.Count);
        Assert.InRange(passes[0].Report!.Surrogate!.Iterations, 1, FixedPoint.N);
    }

    [Fact]
    public void What_the_surrogate_leaves_undone_is_left_to_the_fixed_point()
    {
        // One inner iteration only: the change added is A dx for a dx of one direction, the rest stays x̃.
        var half = new LinearPassSurrogate(2, (dx, output) =>
        {
            output[0] = -dx[0];
            output[1] = -3 * dx[1];
        }, tolerance: 0.5, most: 1);
        double[] change = [0, 0];
        Assert.Equal(1, half.Add([1, 0], change));
        Assert.Equal([0.5, 0], change); // dr = −2 dx, so dx = −½ and A dx = ½
    }
}
