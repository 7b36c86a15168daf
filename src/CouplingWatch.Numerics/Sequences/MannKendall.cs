using MathNet.Numerics;

namespace CouplingWatch.Numerics.Sequences;

/// <summary>
/// Test for a monotone trend: S counts rising minus falling pairs. Blind to a sequence that falls and then rises again.
/// Source: "Nonparametric tests against trend", Econometrica 13 (1945) 245–259; variance with ties after Kendall, Rank
/// Correlation Methods, 1975 (from memory).
/// </summary>
/// <param name="S">Rising minus falling pairs.</param>
/// <param name="Variance">Variance of S without a trend, corrected for ties.</param>
/// <param name="Z">Normal score, with continuity correction; 0 when S or the variance is 0.</param>
/// <param name="P">Two-sided probability of |Z| without a trend, 0 to 1.</param>
/// <param name="TauB">Kendall's τ_b, −1 to 1; NaN when all values are equal.</param>
public readonly record struct MannKendall(long S, double Variance, double Z, double P, double TauB)
{
    /// <summary>Test of values in order of time. Cost n². NaN values are refused.</summary>
    public static MannKendall Of(ReadOnlySpan<double> y)
    {
        long s = 0;
        int n = y.Length;
        for (int i = 0; i < n; i++)
        {
            if (double.IsNaN(y[i])) throw new ArgumentException($"value {i} is NaN", nameof(y));
            for (int j = i + 1; j < n; j++) s += y[j].CompareTo(y[i]);
        }
        double[] rising = y.ToArray();
        Array.Sort(rising);
        double ties = 0, tiedPairs = 0;
        for (int start = 0, end; start < n; start = end)
        {
            for (end = start + 1; end < n && rising[end] == rising[start];) end++;
            double t = end - start;
            ties += t * (t - 1) * ((2 * t) + 5);
            tiedPairs += t * (t - 1) / 2;
        }
        double variance = (((double)n * (n - 1) * ((2.0 * n) + 5)) - ties) / 18;
        double z = s == 0 || variance <= 0 ? 0 : (s - Math.Sign(s)) / Math.Sqrt(variance);
        double pairs = (double)n * (n - 1) / 2;
        double tau = pairs > tiedPairs ? s / Math.Sqrt(pairs * (pairs - tiedPairs)) : double.NaN;
        return new MannKendall(s, variance, z, SpecialFunctions.Erfc(Math.Abs(z) / Math.Sqrt(2)), tau);
    }
}
