using ColdPlate.Cases;
using ColdPlate.Coupling;
using ColdPlate.Layers;
using ColdPlate.Plate;
using CoupledRuns;
using CouplingWatch.Samples.Tests.Runs;

namespace CouplingWatch.Samples.Tests.Plate;

public class HeatBalance
{
    [Fact]
    public void Heat_put_in_stays_in_while_the_far_wall_is_out_of_reach()
    {
        // A thick plate for a short time: what the heaters bring and what crosses the wetted wall is all that changes the store.
        var mesh = new LayerMesh(0.02, 0.1, 10, 200);
        var plate = new HeatedPlate(mesh, new LayerMaterial(1.5, 1.6e6), 1e-3, 1e-12);
        plate.BeginStep(0.05);
        for (var i = 0; i < mesh.Columns; i++) plate.Heating[i * plate.NodesAcross + 2] = 1000 + 100 * i;
        double[] flux = [.. Enumerable.Range(0, 10).Select(i => 50.0 * i)], wall = new double[10];
        for (var n = 0; n < 20; n++)
        {
            plate.Solve(flux, wall);
            plate.Accept(wall);
        }
        var expected = 20 * 0.05 * mesh.Width * (plate.Heating.Sum() - flux.Sum());
        Assert.Equal(1, plate.StoredHeat() / expected, 1e-8);
    }

    [Fact]
    public async Task A_plate_nobody_heats_stays_at_the_temperature_of_the_wall()
    {
        var problem = new PlateProblem(new PlateCase { Heaters = 0, InflowSwing = 0 }, TimeProvider.System);
        var run = new CoupledRun(problem, PlateCases.Of("steady").Plan with { Steps = 3 }, new RecordingLink(), TimeProvider.System);
        await run.RunAsync(TestContext.Current.CancellationToken);
        Assert.Equal(0, problem.StoredHeat);
    }

    [Theory]
    [InlineData("steady", 4, 7)] // measured 5.5
    [InlineData("short-history", 6, 9)] // 7.1
    [InlineData("patient", 5.5, 9)] // 7.2
    [InlineData("weak", 4, 8)] // 6.1
    public async Task Iterations_a_step_of_the_named_cases(string name, double low, double high)
    {
        var scenario = PlateCases.Of(name);
        var run = new CoupledRun(new PlateProblem(scenario.Plate, TimeProvider.System), scenario.Plan with { Steps = 80 }, new RecordingLink(), TimeProvider.System);
        await run.RunAsync(TestContext.Current.CancellationToken);
        Assert.InRange(run.Counts.Skip(20).Average(), low, high);
    }
}
