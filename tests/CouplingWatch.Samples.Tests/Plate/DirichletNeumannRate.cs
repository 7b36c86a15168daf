using ColdPlate.Coupling;
using ColdPlate.Layers;

namespace CouplingWatch.Samples.Tests.Plate;

/// <summary>
/// The thermal iteration against its exact discrete rate −S₁/S₂ ("On the convergence rate of the Dirichlet-Neumann iteration for
/// unsteady thermal fluid-structure interaction", Computational Mechanics 62 (2018) 525-541, DOI 10.1007/s00466-017-1511-3; the
/// formula for finite volumes with half cells at the interface is the lumped one, derived for this check).
/// </summary>
public class DirichletNeumannRate
{
    /// <summary>S = g − b²(T⁻¹)_NN of one layer for the mode with eigenvalue <paramref name="mu"/> of the second difference along the interface.</summary>
    private static double S(LayerMesh mesh, LayerMaterial material, double dt, double mu)
    {
        double dx = mesh.Spacing, k = material.Conductivity, c = material.HeatCapacity;
        double a = c * dx / dt + 2 * k / dx + k * mu * dx, b = -k / dx, g = c * dx / (2 * dt) + k / dx + k * mu * dx / 2;
        var theta = Math.Acosh(a / (2 * Math.Abs(b)));
        var n = mesh.Inner;
        var corner = Math.Exp(-theta) * (1 - Math.Exp(-2 * n * theta)) / (1 - Math.Exp(-2 * (n + 1) * theta)) / Math.Abs(b);
        return g - b * b * corner;
    }

    /// <summary>Rate of the pass for cosine mode <paramref name="mode"/> along the interface, measured.</summary>
    private static double Measured(PlateCase cold, int mode)
    {
        var problem = new PlateProblem(cold with { Velocity = 0, ConductivitySlope = 0, Heaters = 0, InflowSwing = 0 }, TimeProvider.System);
        problem.BeginStep(cold.TimeStep);
        var n = problem.Size;
        double[] x = [.. Enumerable.Range(0, n).Select(i => Math.Cos(mode * Math.PI * (i + 0.5) / n))], y = new double[n];
        problem.Pass(x, y);
        var rate = x.Zip(y, (a, b) => a * b).Sum() / x.Sum(a => a * a);
        for (var i = 0; i < n; i++) Assert.Equal(rate * x[i], y[i], 1e-9 * Math.Abs(rate)); // the cosine is an eigenvector
        return rate;
    }

    private static double Exact(PlateCase cold, int mode)
    {
        var s = Math.Sin(mode * Math.PI / (2 * cold.PlateMesh.Columns));
        var mu = 4 * s * s / (cold.PlateMesh.Width * cold.PlateMesh.Width);
        return -S(cold.ChannelMesh, cold.Coolant, cold.TimeStep, mu) / S(cold.PlateMesh, cold.Plate, cold.TimeStep, mu);
    }

    [Fact]
    public void The_worked_example_has_the_rate_of_the_lumped_formula()
    {
        var example = new PlateCase
        {
            ChannelMesh = new LayerMesh(1, 1, 4, 4),
            Coolant = new LayerMaterial(1, 1),
            PlateMesh = new LayerMesh(1, 1, 4, 4),
            Plate = new LayerMaterial(2, 3),
            TimeStep = 0.1,
        };
        Assert.Equal(-0.400445033407338, Exact(example, 0), 1e-13);
        Assert.Equal(-0.400445033407338, Measured(example, 0), 1e-12);
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(7)]
    [InlineData(30)]
    [InlineData(59)]
    public void Every_mode_of_the_cold_plate_has_its_exact_rate(int mode)
    {
        var cold = new PlateCase();
        Assert.Equal(1, Measured(cold, mode) / Exact(cold, mode), 1e-10);
    }

    [Fact]
    public void The_roles_are_the_wrong_way_round_and_swapping_the_materials_makes_the_coupling_weak()
    {
        var cold = new PlateCase();
        Assert.InRange(Measured(cold, 0), -17.5, -12);
        var weak = ColdPlate.Cases.PlateCases.Of("weak").Plate;
        Assert.InRange(Measured(weak, 0), -0.3, -0.01);
    }
}
