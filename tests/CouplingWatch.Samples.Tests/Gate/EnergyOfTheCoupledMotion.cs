using CoupledRuns;
using CouplingWatch.Samples.Tests.Runs;
using LockGate.Cases;
using LockGate.Coupling;
using LockGate.Loads;
using LockGate.Water;

namespace CouplingWatch.Samples.Tests.Gate;

public class EnergyOfTheCoupledMotion
{
    private static readonly GateCase Frictionless = new() { GapDrag = 0, Damping = 0, InnerTolerance = 1e-11, Relative = 1e-10 };

    /// <summary>Energy of leaf and water, J per metre: the water that moves with the leaf has ½ ∫ v·p(v), p(v) its answer to v as an acceleration.</summary>
    private static double Energy(GateProblem problem)
    {
        var mesh = problem.Water.Mesh;
        var water = new PotentialFlow(mesh, problem.Water.Density, 1e-12, WarmStart.LastPass);
        double[] velocity = new double[mesh.CellsUp], pressure = new double[mesh.CellsUp];
        for (var j = 0; j < velocity.Length; j++)
            velocity[j] = problem.Leaf.Shape.Mean(j * mesh.Height, (j + 1) * mesh.Height).Dot(problem.Leaf.Velocity);
        water.Solve(velocity, 0, pressure);
        return problem.Leaf.Energy() + 0.5 * mesh.Height * velocity.Zip(pressure, (v, p) => v * p).Sum();
    }

    private static async Task<List<double>> EnergiesAsync(GateCase gate, int steps)
    {
        var problem = new GateProblem(gate, TimeProvider.System);
        var energies = new List<double>();
        var link = new RecordingLink();
        var plan = GateCases.Of("steady").Plan with { Steps = steps };
        var run = new CoupledRun(problem, plan, new AfterEveryStep(link, () => energies.Add(Energy(problem))), TimeProvider.System);
        await run.RunAsync(TestContext.Current.CancellationToken);
        return energies;
    }

    [Fact]
    public async Task After_a_nudge_the_energy_of_leaf_and_water_stays_constant_without_friction()
    {
        var energies = await EnergiesAsync(Frictionless with { Loads = [new VesselNudge(5e3, 9, 0.5, 0, 0.05, double.PositiveInfinity)] }, 60);
        var after = energies[12];
        Assert.True(after > 0);
        Assert.All(energies.Skip(12), e => Assert.Equal(1, e / after, 1e-5));
    }

    [Fact]
    public async Task Drag_in_the_gap_takes_energy_and_never_gives_any()
    {
        var energies = await EnergiesAsync(Frictionless with { GapDrag = 2000, Loads = [new VesselNudge(2e4, 9, 0.5, 0, 0.05, double.PositiveInfinity)] }, 60);
        Assert.True(energies[^1] < 0.97 * energies[12], $"{energies[12]} → {energies[^1]}");
        for (var n = 13; n < energies.Count; n++) Assert.True(energies[n] <= energies[n - 1] * (1 + 1e-7));
    }

    [Fact]
    public async Task A_leaf_nobody_touches_stays_where_it_is() => Assert.All(await EnergiesAsync(Frictionless, 5), e => Assert.Equal(0, e));

    private sealed class AfterEveryStep(IRunLink inner, Action action) : IRunLink
    {
        public int NewestRevision => inner.NewestRevision;

        public Task<CouplingWatch.Wire.SettingsRevision?> ReadSettingsAsync(CancellationToken stop) => inner.ReadSettingsAsync(stop);

        public void Send(CouplingWatch.Records.StreamRecord record)
        {
            inner.Send(record);
            if (record is CouplingWatch.Records.StepRecord) action();
        }
    }
}
