using System.Collections.Concurrent;
using CouplingWatch.Records;

namespace CouplingWatch.Sweeps;

/// <summary>Counts of runs that keep one set of settings from the first step on, computed once.</summary>
internal sealed class WholeRuns
{
    private const int Steps = 200;
    private readonly ConcurrentDictionary<(Variant, CouplingSettings), Lazy<double[]>> runs = new();

    /// <summary>Iterations of every step; a diverged run counts 40 for the steps it lacks.</summary>
    public double[] Of(Variant variant, CouplingSettings settings) => runs.GetOrAdd((variant, settings), key => new Lazy<double[]>(() =>
    {
        var counts = RacedRun.Scripted(key.Item1, key.Item2, Steps, []).Steps.Select(s => (double)s.Count).ToList();
        while (counts.Count < Steps) counts.Add(40);
        return [.. counts];
    })).Value;
}
