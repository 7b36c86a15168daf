namespace LockGate.Leaf;

/// <summary>
/// Cubic Hermite element of a straight Euler-Bernoulli beam of length ℓ with unknowns (w₁, ℓθ₁, w₂, ℓθ₂): rotations are multiplied
/// by ℓ so that all unknowns are metres. The matrices are the textbook ones (consistent mass).
/// </summary>
internal static class HermiteElement
{
    private static readonly double[] StiffnessPattern = [12, 6, -12, 6, 6, 4, -6, 2, -12, -6, 12, -6, 6, 2, -6, 4];
    private static readonly double[] MassPattern = [156, 22, 54, -13, 22, 4, 13, -3, 54, 13, 156, -22, -13, -3, -22, 4];

    /// <summary>Entry of the stiffness matrix, N/m per metre of leaf width; <paramref name="rigidity"/> = EI in N·m² per metre.</summary>
    public static double Stiffness(int row, int column, double rigidity, double length) =>
        rigidity / (length * length * length) * StiffnessPattern[4 * row + column];

    /// <summary>Entry of the consistent mass matrix, kg per metre of leaf width; <paramref name="mass"/> in kg/m².</summary>
    public static double Mass(int row, int column, double mass, double length) => mass * length / 420 * MassPattern[4 * row + column];

    /// <summary>Value of shape function <paramref name="k"/> (0…3) at s in 0…1.</summary>
    public static double Shape(int k, double s) => k switch
    {
        0 => 1 - 3 * s * s + 2 * s * s * s,
        1 => s - 2 * s * s + s * s * s,
        2 => 3 * s * s - 2 * s * s * s,
        _ => s * s * s - s * s,
    };

    /// <summary>Integral of shape function <paramref name="k"/> from 0 to s.</summary>
    public static double Integral(int k, double s) => k switch
    {
        0 => s - s * s * s + s * s * s * s / 2,
        1 => s * s / 2 - 2 * s * s * s / 3 + s * s * s * s / 4,
        2 => s * s * s - s * s * s * s / 2,
        _ => s * s * s * s / 4 - s * s * s / 3,
    };
}
