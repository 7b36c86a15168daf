using CouplingWatch.Coupling.Relaxation;

namespace CouplingWatch.Coupling.Tests.Relaxation;

/// <summary>
/// "Added-mass effect in the design of partitioned algorithms for fluid-structure problems", Comput. Methods Appl. Mech. Engrg. 194
/// (2005) 4506-4527, DOI 10.1016/j.cma.2004.12.005: potential fluid of size L × R under a thin wall, mode by mode
/// η ← −ρ_f μ_k/(ρ_s h + a Δt²) η with μ_k = L/(kπ tanh(kπR/L)).
/// </summary>
public class AddedMassLimit
{
    private const double Length = 5, Height = 0.5, WallMass = 0.11, TimeStep = 1e-4;
    private const double Elastic = 0.75e6 * 0.1 / ((1 - 0.25) * Height * Height);

    private static double Mu(int k) => Length / (k * Math.PI * Math.Tanh(k * Math.PI * Height / Length));

    private static double Eigenvalue(int k) => -Mu(k) / (WallMass + Elastic * TimeStep * TimeStep);

    [Fact]
    public void The_added_mass_of_the_first_modes_is_as_published()
    {
        Assert.Equal(5.231639433182524, Mu(1), 1e-12);
        Assert.Equal(1.428953635461938, Mu(2), 1e-12);
        Assert.Equal(0.720459402961246, Mu(3), 1e-12);
    }

    [Fact]
    public void The_relaxation_limit_is_as_published() => Assert.Equal(0.042651585998246, RelaxationRange.Limit(Eigenvalue(1)), 1e-14);

    [Theory]
    [InlineData(0.999, true)]
    [InlineData(1.001, false)]
    public void Fixed_relaxation_converges_just_below_the_limit_and_diverges_just_above(double share, bool converges)
    {
        var omega = share * RelaxationRange.Limit(Eigenvalue(1));
        var coupling = new SteppedCoupling(1, new MethodSettings { Method = MethodKind.Fixed, Relaxation = omega });
        var passes = FixedPoint.Step(coupling, 0, x => [Eigenvalue(1) * x[0]], [1], 0, most: 200);
        Assert.Equal(converges, passes[^1].Norm < passes[0].Norm);
        Assert.Equal(share < 1 ? 0.998 : 1.002, passes[1].Norm / passes[0].Norm, 1e-9);
    }

    [Fact]
    public void The_best_relaxation_makes_both_ends_of_the_spectrum_equally_fast()
    {
        double low = Eigenvalue(1), high = Eigenvalue(3), omega = RelaxationRange.Best(low, high);
        Assert.Equal(-(1 - omega * (1 - low)), 1 - omega * (1 - high), 1e-12);
    }

    [Fact]
    public void An_eigenvalue_of_one_has_no_limit() => Assert.Throws<ArgumentOutOfRangeException>(() => RelaxationRange.Limit(1));
}
