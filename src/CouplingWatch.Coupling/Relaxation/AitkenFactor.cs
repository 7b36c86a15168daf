namespace CouplingWatch.Coupling.Relaxation;

/// <summary>
/// Aitken's dynamic relaxation factor for vectors: ω_k = −ω_{k−1} r_{k−1}·(r_k − r_{k−1})/‖r_k − r_{k−1}‖².
/// Source: "Fixed-point fluid-structure interaction solvers with dynamic relaxation", Computational Mechanics 43 (2008) 61-72,
/// DOI 10.1007/s00466-008-0255-5.
/// </summary>
public static class AitkenFactor
{
    /// <param name="before">ω_{k−1}.</param>
    /// <param name="previous">r_{k−1}.</param>
    /// <param name="current">r_k, same length.</param>
    /// <returns>ω_k; <paramref name="before"/> when the two residuals are equal; NaN when they are not finite. Cost O(N).</returns>
    public static double Next(double before, ReadOnlySpan<double> previous, ReadOnlySpan<double> current)
    {
        if (previous.Length != current.Length)
            throw new ArgumentException($"{previous.Length} and {current.Length} entries; both residuals have the same length.", nameof(current));
        double product = 0, square = 0;
        for (var i = 0; i < current.Length; i++)
        {
            var difference = current[i] - previous[i];
            product += previous[i] * difference;
            square += difference * difference;
        }
        return square == 0 ? before : -before * product / square;
    }
}
