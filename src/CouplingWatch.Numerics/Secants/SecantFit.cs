using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Secants;

/// <summary>
/// Least squares on the kept secant columns: α minimises ‖V α + r‖, from the small matrices alone.
/// </summary>
public sealed class SecantFit
{
    private SecantFit(double[] alpha, double[] components, double norm, double uncoveredNorm, double live, double history)
    {
        Alpha = alpha;
        Components = components;
        ResidualNorm = norm;
        UncoveredNorm = uncoveredNorm;
        LiveShare = live;
        HistoryShare = history;
    }

    /// <summary>Coefficients, one per kept column, newest first; V·α ≈ −r. Dimensionless.</summary>
    public double[] Alpha { get; }

    /// <summary>Components of r on the orthonormal directions of the kept columns, newest first; units of r.</summary>
    public double[] Components { get; }

    /// <summary>‖r‖.</summary>
    public double ResidualNorm { get; }

    /// <summary>‖r + Vα‖: what the kept columns do not promise to remove; units of r.</summary>
    public double UncoveredNorm { get; }

    /// <summary>c = ‖r + Vα‖ ÷ ‖r‖, 0 to 1; accurate to 1e-15 absolute. 1 for r = 0.</summary>
    public double UncoveredShare => ResidualNorm > 0 ? UncoveredNorm / ResidualNorm : 1;

    /// <summary>Share of ‖r‖² on the directions of the live columns, 0 to 1.</summary>
    public double LiveShare { get; }

    /// <summary>Share of ‖r‖² on the directions that only the reused columns bring, 0 to 1. Live + history + c² = 1.</summary>
    public double HistoryShare { get; }

    /// <summary>‖α‖.</summary>
    public double AlphaNorm => LongVector.Norm(Alpha);

    /// <summary>Solves for one residual.</summary>
    /// <param name="filter">The kept columns.</param>
    /// <param name="qtr">Qᵀr on the basis the filter was applied to, at least as many entries as its rank then was.</param>
    /// <param name="outsideNorm">‖r − QQᵀr‖ from <see cref="SecantBasis.Project"/>.</param>
    /// <param name="liveKept">How many of the kept columns are live: the first ones, as they are the newest.</param>
    /// <returns>NaN throughout when r holds a NaN or infinity. With nothing kept: no α, c = 1.</returns>
    public static SecantFit Solve(FilterOutcome filter, ReadOnlySpan<double> qtr, double outsideNorm, int liveKept = 0)
    {
        ArgumentNullException.ThrowIfNull(filter);
        GrowingQr factor = filter.Factor;
        if (qtr.Length < factor.Rows) throw new ArgumentException($"{qtr.Length} entries, {factor.Rows} needed", nameof(qtr));
        if (liveKept < 0 || liveKept > factor.Count) throw new ArgumentOutOfRangeException(nameof(liveKept), liveKept, $"must be 0 to {factor.Count}");

        double[] y = qtr[..factor.Rows].ToArray();
        double norm = double.Hypot(LongVector.Norm(y), outsideNorm);
        factor.Reflect(y);
        double[] components = y.AsSpan(0, factor.Count).ToArray();
        double uncovered = double.Hypot(LongVector.Norm(y.AsSpan(factor.Count)), outsideNorm);
        double live = Square(LongVector.Norm(components.AsSpan(0, liveKept)), norm);
        double history = Square(LongVector.Norm(components.AsSpan(liveKept)), norm);

        double[] alpha = [.. components.Select(value => -value)];
        factor.SolveTriangle(alpha);
        return new SecantFit(alpha, components, norm, uncovered, live, history);
    }

    private static double Square(double part, double whole) => whole == 0 ? 0 : part / whole * (part / whole);
}
