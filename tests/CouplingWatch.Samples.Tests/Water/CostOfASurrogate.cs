using LockGate.Water;

namespace CouplingWatch.Samples.Tests.Water;

/// <summary>What a surrogate costs of a pass. Common practice, no source: about 11 % for a mesh twice as coarse, about 2 % for a one-dimensional formula.</summary>
public class CostOfASurrogate
{
    [Theory]
    [InlineData(40, 16)]
    [InlineData(60, 24)]
    [InlineData(100, 40)]
    public void A_chamber_twice_as_coarse_costs_about_a_tenth_of_the_work(int along, int up)
    {
        var share = Work(along / 2, up / 2) / Work(along, up);
        Assert.InRange(share, 0.11 / 2, 0.11 * 2);
    }

    [Fact]
    public void A_formula_of_one_value_a_row_costs_less_than_its_two_hundredths()
    {
        // One multiplication a face row against the inner iterations of the chamber; two in a hundred is what practice allows for.
        const int up = 24;
        Assert.True(up / Work(60, up) < 0.02);
    }

    /// <summary>Cells times inner iterations of one solve to the same tolerance.</summary>
    private static double Work(int along, int up)
    {
        var water = new PotentialFlow(new ChamberMesh(30, 12, along, up), 1000, 1e-8, WarmStart.LastPass);
        var acceleration = Enumerable.Range(0, up).Select(j => Math.Sin(Math.PI * (j + 0.5) / up)).ToArray();
        water.Solve(acceleration, 0, new double[up]);
        return (double)water.Mesh.CellCount * water.InnerIterations;
    }
}
