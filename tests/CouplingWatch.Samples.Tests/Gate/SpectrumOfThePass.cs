using CouplingWatch.Coupling.Relaxation;
using LockGate.Coupling;

namespace CouplingWatch.Samples.Tests.Gate;

public class SpectrumOfThePass
{
    /// <summary>The most negative eigenvalue of one pass, by power iteration on differences of passes.</summary>
    internal static double Smallest(GateCase gate)
    {
        var problem = new GateProblem(gate with { GapDrag = 0, InnerTolerance = 1e-12 }, TimeProvider.System);
        problem.BeginStep(gate.TimeStep);
        double[] zero = new double[problem.Size], atZero = new double[problem.Size], x = new double[problem.Size], y = new double[problem.Size];
        problem.Pass(zero, atZero);
        for (var i = 0; i < x.Length; i++) x[i] = 1e-3 * Math.Sin(i + 1);
        var eigenvalue = 0.0;
        for (var n = 0; n < 60; n++)
        {
            problem.Pass(x, y);
            double xy = 0, xx = 0;
            for (var i = 0; i < x.Length; i++)
            {
                y[i] -= atZero[i];
                xy += x[i] * y[i];
                xx += x[i] * x[i];
            }
            eigenvalue = xy / xx;
            var scale = 1e-3 / Math.Sqrt(y.Sum(v => v * v));
            for (var i = 0; i < x.Length; i++) x[i] = y[i] * scale;
        }
        return eigenvalue;
    }

    [Fact]
    public void The_light_leaf_has_rates_to_about_minus_nine_and_a_relaxation_limit_below_two_tenths()
    {
        var smallest = Smallest(new GateCase());
        Assert.Equal(-9.1, smallest, 0.25);
        Assert.Equal(0.197, RelaxationRange.Limit(smallest), 0.005);
    }

    [Fact]
    public void A_leaf_ten_times_heavier_has_rates_about_ten_times_smaller() =>
        Assert.Equal(-0.92, Smallest(new GateCase { LeafMass = 7000 }), 0.1);

    [Fact]
    public void The_rate_does_not_depend_on_the_chamber_mesh_beyond_a_few_per_cent() =>
        Assert.Equal(1, Smallest(new GateCase { CellsAlong = 38, CellsUp = 15 }) / Smallest(new GateCase()), 0.05);
}
