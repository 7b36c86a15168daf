namespace CouplingWatch.Coupling.Relaxation;

/// <summary>
/// Which fixed relaxations converge, from the extreme real eigenvalues of the pass: x ← x + ω(H(x) − x) multiplies the error in the
/// direction of eigenvalue λ by 1 − ω(1 − λ).
/// </summary>
/// <remarks>The rule behind the added-mass limit of "Added-mass effect in the design of partitioned algorithms for fluid-structure
/// problems", Comput. Methods Appl. Mech. Engrg. 194 (2005) 4506-4527, DOI 10.1016/j.cma.2004.12.005.</remarks>
public static class RelaxationRange
{
    /// <summary>Converges for 0 &lt; ω &lt; 2/(1 − λ_min). <paramref name="smallest"/> is below 1.</summary>
    public static double Limit(double smallest) => 2 / (1 - Below1(smallest, nameof(smallest)));

    /// <summary>The fastest fixed relaxation 2/(2 − λ_min − λ_max).</summary>
    public static double Best(double smallest, double largest) =>
        2 / (2 - Below1(smallest, nameof(smallest)) - Below1(largest, nameof(largest)));

    private static double Below1(double eigenvalue, string name) => eigenvalue < 1
        ? eigenvalue
        : throw new ArgumentOutOfRangeException(name, eigenvalue, "No positive relaxation converges with an eigenvalue of 1 or more.");
}
