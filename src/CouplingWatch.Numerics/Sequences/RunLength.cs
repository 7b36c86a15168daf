using MathNet.Numerics;
using MathNet.Numerics.Integration;
using MathNet.Numerics.LinearAlgebra.Double;

namespace CouplingWatch.Numerics.Sequences;

/// <summary>
/// Average number of values until a control scheme signals, for independent normal values of deviation 1: Fredholm integral
/// equations of the second kind, solved on Gauss–Legendre nodes. Tells what a decision limit means.
/// Source: "A simple method for studying run-length distributions of exponentially weighted moving average charts",
/// Technometrics 29 (1987) 401–407 (from memory).
/// </summary>
public static class RunLength
{
    private const int Nodes = 80;

    /// <summary>One-sided CUSUM started at zero.</summary>
    /// <param name="allowance">k, 0 or more.</param>
    /// <param name="limit">h, above 0.</param>
    /// <param name="shift">Mean of the values, in deviations, upward positive.</param>
    public static double CusumOneSided(double allowance, double limit, double shift)
    {
        RequirePositive(limit, nameof(limit));
        var (nodes, weights) = GaussLegendre(0, limit);
        // L(u) = 1 + L(0)·Φ(k − μ − u) + ∫₀ʰ L(y)·φ(y + k − μ − u) dy
        int n = nodes.Length;
        var system = new DenseMatrix(n + 1, n + 1);
        for (int row = 0; row <= n; row++)
        {
            double u = row == n ? 0 : nodes[row];
            double offset = allowance - shift - u;
            for (int j = 0; j < n; j++) system[row, j] = -weights[j] * Density(nodes[j] + offset);
            system[row, n] = -Distribution(offset);
            system[row, row] += 1;
        }
        return system.Solve(DenseVector.Create(n + 1, 1))[n];
    }

    /// <summary>Two-sided CUSUM: 1/L = 1/L₊ + 1/L₋.</summary>
    public static double CusumTwoSided(double allowance, double limit, double shift) =>
        1 / ((1 / CusumOneSided(allowance, limit, shift)) + (1 / CusumOneSided(allowance, limit, -shift)));

    /// <summary>EWMA with fixed limits, started at the mean.</summary>
    /// <param name="weight">λ, 0 &lt; λ ≤ 1.</param>
    /// <param name="factor">L, above 0: limits ±L·√(λ/(2 − λ)).</param>
    /// <param name="shift">Mean of the values, in deviations.</param>
    public static double Ewma(double weight, double factor, double shift)
    {
        if (!(weight > 0 && weight <= 1)) throw new ArgumentOutOfRangeException(nameof(weight), weight, "must be above 0 and at most 1");
        RequirePositive(factor, nameof(factor));
        double limit = factor * Math.Sqrt(weight / (2 - weight));
        var (nodes, weights) = GaussLegendre(-limit, limit);
        int n = nodes.Length;
        var system = new DenseMatrix(n + 1, n + 1);
        for (int row = 0; row <= n; row++)
        {
            double u = row == n ? 0 : nodes[row];
            for (int j = 0; j < n; j++)
                system[row, j] = -weights[j] / weight * Density(((nodes[j] - ((1 - weight) * u)) / weight) - shift);
            system[row, row] += 1;
        }
        return system.Solve(DenseVector.Create(n + 1, 1))[n];
    }

    private static (double[] Nodes, double[] Weights) GaussLegendre(double low, double high)
    {
        var rule = new GaussLegendreRule(low, high, Nodes);
        return (rule.Abscissas, rule.Weights);
    }

    private static double Density(double x) => Math.Exp(-x * x / 2) / Math.Sqrt(2 * Math.PI);

    private static double Distribution(double x) => SpecialFunctions.Erfc(-x / Math.Sqrt(2)) / 2;

    private static void RequirePositive(double value, string name)
    {
        if (!(value > 0) || !double.IsFinite(value)) throw new ArgumentOutOfRangeException(name, value, "must be above 0 and finite");
    }
}
