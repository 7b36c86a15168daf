using CouplingWatch.Numerics.Secants;
using MathNet.Numerics.LinearAlgebra;

namespace CouplingWatch.Coupling.Tests.QuasiNewton;

/// <summary>J = J_prev + (W − J_prev V) V⁺, formed densely, against the linear-memory walk that never forms it.</summary>
public class MultiStepIdentities
{
    private static MethodSettings Settings(MethodKind method, int historySteps) =>
        new() { Method = method, Relaxation = 0.5, HistorySteps = historySteps, FilterRule = SecantFilter.None, FilterThreshold = 0 };

    /// <summary>Columns of a step from its passes, newest first: (V, W).</summary>
    private static (Matrix<double> V, Matrix<double> W) Columns(IReadOnlyList<FixedPoint.Pass> passes, Func<double[], double[]> map)
    {
        var outputs = passes.Select(p => Vector<double>.Build.Dense(map(p.X))).ToList();
        var residuals = passes.Select((p, k) => outputs[k] - Vector<double>.Build.Dense(p.X)).ToList();
        var v = Enumerable.Range(1, passes.Count - 1).Reverse().Select(k => residuals[k] - residuals[k - 1]);
        var w = Enumerable.Range(1, passes.Count - 1).Reverse().Select(k => outputs[k] - outputs[k - 1]);
        return (Matrix<double>.Build.DenseOfColumnVectors(v), Matrix<double>.Build.DenseOfColumnVectors(w));
    }

    private static Matrix<double> Updated(Matrix<double> previous, Matrix<double> v, Matrix<double> w) => previous + (w - previous * v) * v.PseudoInverse();

    [Fact]
    public void The_walk_gives_the_iterates_of_the_dense_recursion_over_three_steps()
    {
        const double tolerance = 5e-4; // few enough columns a step that all of them count
        var coupling = new SteppedCoupling(FixedPoint.N, Settings(MethodKind.Mvqn, 8));
        var jacobian = Matrix<double>.Build.Dense(FixedPoint.N, FixedPoint.N);
        var start = new double[FixedPoint.N];
        for (var step = 0; step < 3; step++)
        {
            var map = FixedPoint.P1(0.05 * step);
            var passes = FixedPoint.Step(coupling, step, map, start, tolerance);
            for (var k = 0; k + 1 < passes.Count; k++)
            {
                if (step == 0 && k == 0) continue; // a relaxation
                var output = Vector<double>.Build.Dense(map(passes[k].X));
                var residual = output - Vector<double>.Build.Dense(passes[k].X);
                var (v, w) = k == 0 ? (null!, null!) : Columns([.. passes.Take(k + 1)], map);
                var current = k == 0 ? jacobian : Updated(jacobian, v, w);
                var expected = output - current * residual;
                for (var i = 0; i < FixedPoint.N; i++) Assert.Equal(expected[i], passes[k + 1].X[i], 1e-9);
            }
            if (passes.Count > 1)
            {
                var (v, w) = Columns(passes, map);
                jacobian = Updated(jacobian, v, w);
            }
            start = passes[^1].X;
        }
    }

    [Fact]
    public void Without_a_history_it_is_iqn_ils()
    {
        var ils = FixedPoint.Step(new SteppedCoupling(FixedPoint.N, Settings(MethodKind.IqnIls, 0)), 0, FixedPoint.P1(), new double[FixedPoint.N], 1e-8);
        var multi = FixedPoint.Step(new SteppedCoupling(FixedPoint.N, Settings(MethodKind.Mvqn, 0)), 0, FixedPoint.P1(), new double[FixedPoint.N], 1e-8);
        Assert.Equal(ils.Count, multi.Count);
        for (var k = 0; k < ils.Count; k++)
            for (var i = 0; i < FixedPoint.N; i++) Assert.Equal(ils[k].X[i], multi[k].X[i], 1e-11);
    }

    [Fact]
    public void Two_steps_reproduce_the_reference_but_for_its_pseudo_inverse_of_a_seventh_column()
    {
        var coupling = new SteppedCoupling(FixedPoint.N, Settings(MethodKind.Mvqn, 1));
        var first = FixedPoint.Step(coupling, 0, FixedPoint.P1(), new double[FixedPoint.N], 1e-5);
        var rows = ReferenceIterates.Block("aitken_reuse.txt", "## step 1, multi-vector with J0=0");
        for (var k = 0; k < rows.Count; k++) Assert.Equal(1, first[k].Norm / rows[k][1], 1e-6);
        var second = FixedPoint.Step(coupling, 1, FixedPoint.P1(0.05), first[^1].X, 1e-5);
        Assert.Equal(8.83954870e-02, second[0].Norm, 1e-9);
        // The reference takes the pseudo-inverse of 7 columns for 6 rows and needs 4 passes; the newest 6 alone are a better Jacobian here.
        Assert.InRange(second.Count, 3, 4);
    }
}
