namespace CouplingWatch.Numerics.Trials;

/// <summary>
/// Small seeded generator of pseudo-random numbers: the same seed gives the same sequence on every machine. Not for secrets.
/// Source: "Fast splittable pseudorandom number generators", OOPSLA 2014, 453–472, DOI 10.1145/2660193.2660195 (constants from memory;
/// checked by the known first outputs of seed 1234567).
/// </summary>
public struct SplitMix64
{
    private ulong state;

    /// <summary>Starts from a seed; any value.</summary>
    public SplitMix64(ulong seed) => state = seed;

    /// <summary>64 random bits.</summary>
    public ulong Next()
    {
        ulong z = state += 0x9E3779B97F4A7C15;
        z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9;
        z = (z ^ (z >> 27)) * 0x94D049BB133111EB;
        return z ^ (z >> 31);
    }

    /// <summary>Uniform in [0, 1), 53 bits.</summary>
    public double NextDouble() => (Next() >> 11) * (1.0 / (1UL << 53));

    /// <summary>Uniform integer in [0, <paramref name="bound"/>), without bias.</summary>
    public int NextInt(int bound)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(bound, 1);
        ulong range = (ulong)bound;
        ulong refuse = (ulong.MaxValue % range + 1) % range;
        ulong bits;
        do bits = Next(); while (bits > ulong.MaxValue - refuse);
        return (int)(bits % range);
    }

    /// <summary>Standard normal deviate (Box–Muller, one of the pair).</summary>
    public double NextNormal()
    {
        double u = 1 - NextDouble();
        return Math.Sqrt(-2 * Math.Log(u)) * Math.Cos(2 * Math.PI * NextDouble());
    }

    /// <summary>Puts the items into random order (Fisher–Yates).</summary>
    public void Shuffle<T>(Span<T> items)
    {
        for (int i = items.Length - 1; i > 0; i--)
        {
            int j = NextInt(i + 1);
            (items[i], items[j]) = (items[j], items[i]);
        }
    }
}
