using LockGate.Leaf;

namespace CouplingWatch.Samples.Tests.Leaf;

/// <summary>The leaf without water against textbook results for the cantilever.</summary>
public class BeamAlone
{
    private const double Height = 12, Mass = 700, Rigidity = 4e7;

    private static GateLeaf Make(SealContact? seal = null, double damping = 0) => new(new LeafProperties(Height, Mass, Rigidity, 30, damping, seal));

    /// <summary>Consistent load of a uniform pressure.</summary>
    private static double[] Uniform(GateLeaf leaf, double pressure)
    {
        var load = new double[leaf.Unknowns];
        leaf.Shape.Mean(0, Height).AddTo(load, pressure * Height);
        return load;
    }

    private static double Top(ReadOnlySpan<double> x) => x[^2];

    [Fact]
    public void The_static_deflection_under_uniform_pressure_is_qH4_over_8EI()
    {
        var leaf = Make();
        leaf.BeginStep(1e6); // so long that inertia plays no part
        var x = new double[leaf.Unknowns];
        leaf.Solve(Uniform(leaf, 500), x);
        Assert.Equal(500 * Math.Pow(Height, 4) / (8 * Rigidity), Top(x), 1e-9);
    }

    [Fact]
    public void The_first_frequency_is_that_of_the_cantilever()
    {
        // ω₁ = 1.875104² √(EI/(m H⁴)); the static shape under the tip load is close to the first mode.
        var expected = 1.8751040687 * 1.8751040687 * Math.Sqrt(Rigidity / (Mass * Math.Pow(Height, 4)));
        var leaf = Make();
        var x = FirstMode(leaf);
        var top = Top(x);
        leaf.Release(x, new double[x.Length]);
        var dt = 2 * Math.PI / expected / 400;
        var still = new double[x.Length];
        var crossings = new List<double>();
        for (var n = 1; crossings.Count < 9; n++)
        {
            leaf.BeginStep(dt);
            leaf.Solve(still, x);
            leaf.Accept(x);
            if (top * Top(x) < 0) crossings.Add((n - Top(x) / (Top(x) - top)) * dt);
            top = Top(x);
        }
        var measured = Math.PI * (crossings.Count - 1) / (crossings[^1] - crossings[0]);
        Assert.Equal(1, measured / expected, 2e-4);
    }

    /// <summary>The first mode by inverse iteration: the static shape under its own inertia, again and again.</summary>
    private static double[] FirstMode(GateLeaf leaf)
    {
        double[] x = new double[leaf.Unknowns], load = new double[leaf.Unknowns];
        for (var i = 0; i < x.Length; i += 2) x[i] = i + 1;
        leaf.BeginStep(1e6);
        for (var n = 0; n < 12; n++)
        {
            Array.Clear(load);
            for (var f = 0; f < 120; f++)
            {
                var row = leaf.Shape.Mean(f * Height / 120, (f + 1) * Height / 120);
                row.AddTo(load, row.Dot(x));
            }
            leaf.Solve(load, x);
            var scale = 0.01 / Top(x);
            for (var i = 0; i < x.Length; i++) x[i] *= scale;
        }
        return x;
    }

    [Fact]
    public void Free_vibration_keeps_its_energy_and_damping_takes_it()
    {
        foreach (var damping in new[] { 0, 0.01 })
        {
            var leaf = Make(damping: damping);
            var x = FirstMode(leaf);
            for (var i = 0; i < x.Length; i += 2) x[i] += 1e-4 * Math.Sin(i);
            leaf.Release(x, new double[x.Length]);
            var before = leaf.Energy();
            for (var n = 0; n < 300; n++)
            {
                leaf.BeginStep(0.01);
                leaf.Solve(new double[x.Length], x);
                leaf.Accept(x);
            }
            if (damping == 0) Assert.Equal(1, leaf.Energy() / before, 1e-8);
            else Assert.True(leaf.Energy() < 0.9 * before);
        }
    }

    [Fact]
    public void The_seal_lets_the_leaf_go_free_and_then_holds_it()
    {
        var seal = new SealContact(11, 0.02, 1e9, 1e-5);
        Assert.Equal(0, seal.At(0.01).Force);
        Assert.Equal(1e9, seal.At(0.03).Slope);
        Assert.Equal(0.01 * 1e9, seal.At(0.03).Force, 1);
        double[] free = new double[60], held = new double[60];
        GateLeaf alone = Make(), stopped = Make(seal);
        alone.BeginStep(1e6);
        stopped.BeginStep(1e6);
        alone.Solve(Uniform(alone, -500), free);
        stopped.Solve(Uniform(stopped, -500), held);
        Assert.Equal(Top(free), Top(held), 1e-12);
        stopped.Solve(Uniform(stopped, 3000), held);
        Assert.Equal(0.02, stopped.Shape.At(11).Dot(held), 1e-4);
    }

    [Fact]
    public void A_load_that_is_not_finite_gives_a_deflection_that_is_not_a_number()
    {
        var leaf = Make();
        leaf.BeginStep(0.01);
        var x = new double[leaf.Unknowns];
        leaf.Solve(Uniform(leaf, double.PositiveInfinity), x);
        Assert.All(x, v => Assert.True(double.IsNaN(v)));
    }
}
