using CouplingWatch.Coupling.Relaxation;

namespace CouplingWatch.Coupling.Tests.Relaxation;

/// <summary>"Fixed-point fluid-structure interaction solvers with dynamic relaxation", Computational Mechanics 43 (2008) 61-72.</summary>
public class AitkenValues
{
    [Fact]
    public void One_unknown_is_solved_exactly_at_the_third_pass()
    {
        var coupling = new SteppedCoupling(1, new MethodSettings { Method = MethodKind.Aitken, Relaxation = 0.5 });
        var passes = FixedPoint.Step(coupling, 0, x => [1 - 3 * x[0]], [0], 1e-14);
        Assert.Equal([0, 0.5, 0.25], passes.Select(p => p.X[0]));
        Assert.Equal([0.5, 0.25], passes.Take(2).Select(p => p.Report!.Relaxation!.Value));
        Assert.Equal(0, passes[2].Norm);
    }

    [Theory]
    [InlineData(1, 20)]
    [InlineData(2, 47)]
    public void Factors_and_iterates_are_those_of_the_reference(int problem, int last)
    {
        Func<double[], double[]> map = problem == 1 ? FixedPoint.P1() : FixedPoint.P2;
        var rows = ReferenceIterates.Block("aitken_reuse.txt", $"## P{problem} Aitken, omega_0=0.5");
        var coupling = new SteppedCoupling(FixedPoint.N, new MethodSettings { Method = MethodKind.Aitken, Relaxation = 0.5 });
        var passes = FixedPoint.Step(coupling, 0, map, new double[FixedPoint.N], 1e-12, most: 80);
        Assert.Equal(last + 1, passes.Count);
        for (var k = 0; k < rows.Count; k++)
        {
            for (var i = 0; i < FixedPoint.N; i++) Assert.Equal(rows[k][3 + i], passes[k].X[i], 1e-9);
            if (k < last && rows[k][1] > 1e-7) Assert.Equal(rows[k][2], passes[k].Report!.Relaxation!.Value, 1e-5);
        }
    }

    [Fact]
    public void Equal_residuals_leave_the_factor_as_it_was() => Assert.Equal(0.3, AitkenFactor.Next(0.3, [1, 2], [1, 2]));
}
