namespace CouplingWatch.Numerics.Trials;

/// <summary>
/// Effect of one arm of a paired trial against another, with an interval that assumes nothing but differences symmetric
/// about the effect: the values the sign-flip permutation test does not reject. The 2ⁿ − 1 means of all non-empty subsets
/// of the n differences part the line into 2ⁿ pieces that hold the effect with equal probability.
/// Source: "Using subsample values as typical values", Journal of the American Statistical Association 64 (1969) 1303–1317
/// (from memory).
/// </summary>
/// <param name="Effect">Mean difference, challenger − arm 0; negative is better where less is better.</param>
/// <param name="Low">Lower end of the interval; −∞ with fewer than two rounds.</param>
/// <param name="High">Upper end; ∞ with fewer than two rounds.</param>
/// <param name="Confidence">Probability the interval holds the effect: at least what was asked when the rounds allow it, otherwise the most they allow.</param>
/// <param name="Rounds">Number of paired rounds.</param>
public readonly record struct PermutationInterval(double Effect, double Low, double High, double Confidence, int Rounds)
{
    /// <summary>Up to this many rounds all subsets are formed; beyond it they are drawn from the seed.</summary>
    public const int ExactRounds = 14;

    private const int DrawnSubsets = (1 << ExactRounds) - 1;

    /// <summary>Compares paired rounds.</summary>
    /// <param name="armZero">Scores of the settings in use, one per round, finite.</param>
    /// <param name="challenger">Scores of the challenger in the same rounds.</param>
    /// <param name="confidence">Asked probability, above 0 and below 1. Five rounds allow 93.75 %, two 50 %.</param>
    /// <param name="seed">Used beyond <see cref="ExactRounds"/> rounds only.</param>
    /// <exception cref="ArgumentException">No round, lengths that differ, or a score that is not finite.</exception>
    public static PermutationInterval Of(ReadOnlySpan<double> armZero, ReadOnlySpan<double> challenger, double confidence = 0.9, ulong seed = 0)
    {
        if (armZero.Length != challenger.Length) throw new ArgumentException($"{armZero.Length} rounds against {challenger.Length}", nameof(challenger));
        if (armZero.IsEmpty) throw new ArgumentException("at least one round is needed", nameof(armZero));
        if (!(confidence > 0 && confidence < 1)) throw new ArgumentOutOfRangeException(nameof(confidence), confidence, "must be above 0 and below 1");
        int n = armZero.Length;
        var differences = new double[n];
        for (int i = 0; i < n; i++)
        {
            differences[i] = challenger[i] - armZero[i];
            if (!double.IsFinite(differences[i])) throw new ArgumentException($"round {i}: scores {armZero[i]} and {challenger[i]}", nameof(challenger));
        }
        double effect = differences.Sum() / n;
        if (n == 1) return new PermutationInterval(effect, double.NegativeInfinity, double.PositiveInfinity, 1, 1);

        double[] means = n <= ExactRounds ? AllSubsets(differences) : DrawSubsets(differences, seed);
        Array.Sort(means);
        // k pieces are given up on each side: coverage 1 − 2k/(subsets + 1).
        double pieces = means.Length + 1.0;
        int k = Math.Max(1, (int)Math.Floor(((1 - confidence) * pieces / 2) + 1e-9));
        return new PermutationInterval(effect, means[k - 1], means[^k], 1 - (2 * k / pieces), n);
    }

    private static double[] AllSubsets(double[] differences)
    {
        var means = new double[(1 << differences.Length) - 1];
        for (int subset = 1; subset <= means.Length; subset++)
        {
            double sum = 0;
            for (int i = 0; i < differences.Length; i++)
                if ((subset >> i & 1) != 0) sum += differences[i];
            means[subset - 1] = sum / System.Numerics.BitOperations.PopCount((uint)subset);
        }
        return means;
    }

    private static double[] DrawSubsets(double[] differences, ulong seed)
    {
        var random = new SplitMix64(seed);
        var means = new double[DrawnSubsets];
        for (int drawn = 0; drawn < means.Length;)
        {
            double sum = 0;
            int count = 0;
            for (int i = 0; i < differences.Length; i++)
            {
                if ((random.Next() >> 63) == 0) continue;
                sum += differences[i];
                count++;
            }
            if (count > 0) means[drawn++] = sum / count;
        }
        return means;
    }
}
