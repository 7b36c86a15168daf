using LockGate.Water;

namespace CouplingWatch.Samples.Tests.Water;

/// <summary>
/// Water pressure on a rigid vertical wall: the series of "Water pressures on dams during earthquakes", Trans. ASCE 98 (1933) 418-433,
/// for incompressible water, with each term times coth(nπL/2H) for a chamber of length L with a fixed far wall.
/// </summary>
public class PressureOnRigidWall
{
    private const double Density = 1000, Depth = 12, Acceleration = 0.7;

    /// <summary>p/(ρ a H) at a depth below the surface, by the series.</summary>
    private static double Series(double share, double lengthOverDepth)
    {
        var sum = 0.0;
        for (var n = 1; n < 4001; n += 2)
            sum += Math.Sin(n * Math.PI * share / 2) / ((double)n * n) / Math.Tanh(n * Math.PI * lengthOverDepth / 2);
        return 8 / (Math.PI * Math.PI) * sum;
    }

    private static double[] Coefficients(double lengthOverDepth, int cellsUp)
    {
        var mesh = new ChamberMesh(lengthOverDepth * Depth, Depth, (int)Math.Round(lengthOverDepth * cellsUp), cellsUp);
        var water = new PotentialFlow(mesh, Density, 1e-12, WarmStart.LastPass);
        var acceleration = Enumerable.Repeat(Acceleration, cellsUp).ToArray();
        var pressure = new double[cellsUp];
        water.Solve(acceleration, 0, pressure);
        return [.. pressure.Select(p => p / (Density * Acceleration * Depth))];
    }

    private static double Force(double[] coefficients) => coefficients.Average();

    [Theory]
    [InlineData(0.5, 0.813949356)]
    [InlineData(1, 0.589370826)]
    [InlineData(2, 0.544685413)]
    [InlineData(3, 0.542837807)]
    public void The_force_on_the_wall_of_a_finite_chamber_is_that_of_the_series(double lengthOverDepth, double expected)
    {
        double coarse = Force(Coefficients(lengthOverDepth, 40)), fine = Force(Coefficients(lengthOverDepth, 80));
        Assert.Equal(expected, fine, 1e-3);
        Assert.Equal(expected, (4 * fine - coarse) / 3, 2e-4);
    }

    [Fact]
    public void The_distribution_over_the_depth_is_that_of_the_series()
    {
        const int cells = 80;
        var got = Coefficients(2.5, cells);
        for (var j = 0; j < cells; j++) Assert.Equal(Series(1 - (j + 0.5) / cells, 2.5), got[j], j < cells - 2 ? 2e-3 : 6e-3); // the slope at the surface is unbounded
    }

    [Fact]
    public void A_long_chamber_has_the_total_added_mass_of_an_endless_one() =>
        Assert.Equal(0.542754514440835, Force(Coefficients(5, 60)), 1e-3); // 14 ζ(3)/π³

    [Fact]
    public void Shaking_the_far_wall_the_other_way_doubles_what_a_middle_wall_would_see()
    {
        // Both walls moving towards each other is a chamber of half the length with a fixed far wall, by symmetry.
        const int cells = 40;
        var water = new PotentialFlow(new ChamberMesh(2 * Depth, Depth, 2 * cells, cells), Density, 1e-12, WarmStart.LastPass);
        var pressure = new double[cells];
        water.Solve([.. Enumerable.Repeat(Acceleration, cells)], -Acceleration, pressure);
        Assert.Equal(Force(Coefficients(1, cells)), Force([.. pressure.Select(p => p / (Density * Acceleration * Depth))]), 1e-9);
    }
}
