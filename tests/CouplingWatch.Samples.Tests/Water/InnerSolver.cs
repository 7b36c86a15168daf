using LockGate.Water;

namespace CouplingWatch.Samples.Tests.Water;

public class InnerSolver
{
    private static PotentialFlow Chamber(double tolerance, WarmStart start) => new(new ChamberMesh(30, 12, 38, 15), 1000, tolerance, start);

    private static double[] Solve(PotentialFlow water, Func<double, double> acceleration)
    {
        var mesh = water.Mesh;
        var pressure = new double[mesh.CellsUp];
        water.Solve([.. Enumerable.Range(0, mesh.CellsUp).Select(j => acceleration(mesh.FaceMiddle(j)))], 0, pressure);
        return pressure;
    }

    private static double Distance(double[] a, double[] b) => Math.Sqrt(a.Zip(b, (x, y) => (x - y) * (x - y)).Sum());

    private static double Size(double[] a) => Math.Sqrt(a.Sum(x => x * x));

    [Theory]
    [InlineData(1e-4)]
    [InlineData(1e-8)]
    public void What_the_inner_iteration_leaves_behind_is_of_the_order_of_its_tolerance(double tolerance)
    {
        var exact = Solve(Chamber(1e-13, WarmStart.LastPass), y => 1 + Math.Sin(y));
        var got = Solve(Chamber(tolerance, WarmStart.LastPass), y => 1 + Math.Sin(y));
        var error = Distance(exact, got) / Size(exact);
        Assert.InRange(error, tolerance / 1000, tolerance * 100);
    }

    [Fact]
    public void Started_from_the_last_pass_the_same_question_gets_another_answer()
    {
        var water = Chamber(1e-4, WarmStart.LastPass);
        water.BeginStep();
        var first = Solve(water, y => y);
        Solve(water, y => Math.Cos(y));
        Assert.NotEqual(first, Solve(water, y => y));
    }

    [Fact]
    public void Started_from_the_step_the_same_question_gets_the_same_answer_bit_for_bit()
    {
        var water = Chamber(1e-4, WarmStart.StepStart);
        Solve(water, y => y * y);
        water.BeginStep();
        var first = Solve(water, y => y);
        Solve(water, y => Math.Cos(y));
        Assert.Equal(first, Solve(water, y => y));
    }

    [Fact]
    public void Added_mass_is_symmetric_and_positive()
    {
        var water = Chamber(1e-13, WarmStart.LastPass);
        double[] shapes = [0.4, 1.7, 3.1];
        foreach (var a in shapes)
        {
            foreach (var b in shapes)
            {
                double[] pa = Solve(water, y => Math.Sin(a * y)), pb = Solve(water, y => Math.Sin(b * y));
                double ab = 0, ba = 0;
                for (var j = 0; j < pa.Length; j++)
                {
                    ab += pa[j] * Math.Sin(b * water.Mesh.FaceMiddle(j));
                    ba += pb[j] * Math.Sin(a * water.Mesh.FaceMiddle(j));
                }
                Assert.Equal(ab, ba, 1e-8 * Math.Abs(ab) + 1e-6);
                if (a == b) Assert.True(ab > 0);
            }
        }
    }

    [Fact]
    public void A_motion_that_is_not_finite_gives_a_pressure_that_is_not_finite() =>
        Assert.Contains(Solve(Chamber(1e-8, WarmStart.LastPass), _ => double.NaN), double.IsNaN);
}
