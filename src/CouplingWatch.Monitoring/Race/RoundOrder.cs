namespace CouplingWatch.Monitoring.Race;

/// <summary>The order in which the arms of a round take their blocks, drawn from the recorded seed.</summary>
internal static class RoundOrder
{
    /// <summary>Shuffles <paramref name="arms"/> in place (Fisher–Yates); the same seed and round give the same order.</summary>
    public static void Draw(long seed, int round, Span<int> arms)
    {
        var state = unchecked((ulong)seed + 0x9E3779B97F4A7C15UL * (ulong)(1000 * (round + 1)));
        for (var i = arms.Length - 1; i > 0; i--)
        {
            var j = (int)(((UInt128)Next(ref state) * (ulong)(i + 1)) >> 64);
            (arms[i], arms[j]) = (arms[j], arms[i]);
        }
    }

    /// <summary>SplitMix64: "Fast splittable pseudorandom number generators", OOPSLA 2014, DOI 10.1145/2660193.2660195.</summary>
    private static ulong Next(ref ulong state)
    {
        state = unchecked(state + 0x9E3779B97F4A7C15UL);
        var z = state;
        z = unchecked((z ^ (z >> 30)) * 0xBF58476D1CE4E5B9UL);
        z = unchecked((z ^ (z >> 27)) * 0x94D049BB133111EBUL);
        return z ^ (z >> 31);
    }
}
