namespace LockGate.Leaf;

/// <summary>
/// One-sided seal at one height of the leaf: free as long as the leaf stays behind the gap, a spring in front of it, with a smooth
/// knee: force = stiffness · δ ln(1 + exp((w − gap)/δ)).
/// </summary>
/// <param name="Height">Height above the sill, m.</param>
/// <param name="Gap">Deflection towards the water at which the seal is met, m.</param>
/// <param name="Stiffness">N/m per metre of leaf width, 0 or more.</param>
/// <param name="Knee">δ, m, above 0: the smaller, the harder.</param>
public sealed record SealContact(double Height, double Gap, double Stiffness, double Knee)
{
    /// <summary>Force against the deflection <paramref name="w"/> (m), N per metre of width, and its derivative.</summary>
    public (double Force, double Slope) At(double w)
    {
        var u = (w - Gap) / Knee;
        if (u > 40) return (Stiffness * (w - Gap), Stiffness);
        var e = Math.Exp(u);
        return (Stiffness * Knee * Math.Log(1 + e), Stiffness * e / (1 + e));
    }
}
