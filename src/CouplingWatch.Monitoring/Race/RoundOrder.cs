using CouplingWatch.Numerics.Trials;

namespace CouplingWatch.Monitoring.Race;

/// <summary>The order in which the arms of a round take their blocks, drawn from the recorded seed.</summary>
internal static class RoundOrder
{
    /// <summary>Shuffles <paramref name="arms"/> in place; the same seed and round give the same order.</summary>
    public static void Draw(long seed, int round, Span<int> arms)
    {
        // A round draws from its own sequence, so that what was drawn before does not depend on how many arms were left.
        var first = new SplitMix64(unchecked((ulong)seed));
        var own = new SplitMix64(unchecked(first.Next() + (ulong)round));
        new SplitMix64(own.Next()).Shuffle(arms);
    }
}
