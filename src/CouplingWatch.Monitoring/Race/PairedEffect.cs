namespace CouplingWatch.Monitoring.Race;

/// <summary>
/// Mean of paired differences with the interval of all effects that a sign-flip permutation test of the mean does not refuse. Its ends are
/// typical values, means of subsets of the differences: "Using subsample values as typical values", Journal of the American Statistical
/// Association 64 (1969) 1303–1317, DOI 10.1080/01621459.1969.10501057. Exact when the order within each pair was drawn at random,
/// whatever the autocorrelation of what is measured.
/// </summary>
/// <param name="Level">Confidence reached, at least the one asked for; null with too few pairs, and then there are no ends.</param>
public readonly record struct PairedEffect(double Mean, double? Low, double? High, double? Level, int Pairs)
{
    private const int MostPairs = 16;

    /// <param name="differences">1 to 16 finite differences, one a pair.</param>
    /// <param name="level">Least confidence, 0 &lt; level &lt; 1. With n pairs 1 − 2¹⁻ⁿ is the most that can be reached.</param>
    /// <remarks>Cost O(2ⁿ n).</remarks>
    public static PairedEffect Of(ReadOnlySpan<double> differences, double level = 0.9)
    {
        var n = differences.Length;
        if (n is < 1 or > MostPairs) throw new ArgumentOutOfRangeException(nameof(differences), n, $"needs 1 to {MostPairs} pairs");
        if (level is not (> 0 and < 1)) throw new ArgumentOutOfRangeException(nameof(level), level, "must lie in 0 < level < 1");
        var mean = 0.0;
        foreach (var d in differences)
        {
            if (!double.IsFinite(d)) throw new ArgumentOutOfRangeException(nameof(differences), d, "differences are finite");
            mean += d / n;
        }
        var parts = 1 << n;
        // Each of the 2ⁿ gaps between the subset means holds the true effect with the same probability.
        var gaps = (int)Math.Floor((1 - level) * parts / 2 + 1e-9);
        if (gaps < 1) return new PairedEffect(mean, null, null, null, n);
        var means = new double[parts - 1];
        for (var subset = 1; subset < parts; subset++)
        {
            var sum = 0.0;
            var count = 0;
            for (var i = 0; i < n; i++)
            {
                if ((subset >> i & 1) == 0) continue;
                sum += differences[i];
                count++;
            }
            means[subset - 1] = sum / count;
        }
        Array.Sort(means);
        return new PairedEffect(mean, means[gaps - 1], means[^gaps], 1 - 2.0 * gaps / parts, n);
    }
}
