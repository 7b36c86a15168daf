using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Hand;

/// <summary>Strips and passes by hand: counts as given, margins drawn from a fixed seed.</summary>
public static class HandStrip
{
    /// <summary>One bar a step, from step 0, a few minutes apart and ending at <paramref name="until"/>.</summary>
    public static IReadOnlyList<StripBar> Of(DateTimeOffset until, IEnumerable<int> counts, int cap = 40, double minutes = 10, int seed = 1)
    {
        var random = new Random(seed);
        var all = counts.ToArray();
        return [.. all.Select((n, i) => new StripBar(i, i, n, n, n >= cap ? 0.4 : -0.02 - 1.8 * random.NextDouble(), n >= cap ? 1 : 0, At: until.AddMinutes(minutes * (i + 1 - all.Length))))];
    }

    /// <summary>Groups of many steps around a level, the worst now and then far above it.</summary>
    public static IReadOnlyList<StripBar> Groups(DateTimeOffset until, int groups, int size, double level, int seed = 2)
    {
        var random = new Random(seed);
        return [.. Enumerable.Range(0, groups).Select(i =>
        {
            var storm = i > groups * 0.78 && i < groups * 0.83;
            var median = level + random.NextDouble() + (storm ? 3 : 0);
            return new StripBar(i * size, (i + 1) * size - 1, median, (int)(median + 1 + 4 * random.NextDouble() + (storm ? 5 : 0)), -0.6 - 0.7 * random.NextDouble(),
                i == (int)(groups * 0.6) ? 41 : 0, Revision: i == (int)(groups * 0.78) ? 1 : null, At: until.AddMinutes(-4.0 * (groups - i)));
        })];
    }

    /// <summary>Passes from needs, the norm falling (or rising) with them.</summary>
    public static IReadOnlyList<PassPair> Passes(params double[] needs) => [.. needs.Select((y, i) => new PassPair(i, y, y - 4, y <= 0))];

    /// <summary>Passes of a step that explodes: the need stays flat, the norm grows.</summary>
    public static IReadOnlyList<PassPair> Exploding(int passes, double decadesEach = 0.31) =>
        [.. Enumerable.Range(0, passes).Select(i => new PassPair(i, 4.7 - 0.02 * i, -3.1 + (i < 2 ? 0 : decadesEach * (i - 1)), false))];

    /// <summary>Counts from a fixed seed around a level.</summary>
    public static int[] Counts(int steps, int first, int level, int spread, int seed) => Counts(steps, first, level, spread, new Random(seed));

    private static int[] Counts(int steps, int first, int level, int spread, Random random) =>
        [.. Enumerable.Range(0, steps).Select(i => i == 0 ? first : level + random.Next(spread + 1))];
}
