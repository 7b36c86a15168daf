using CouplingWatch.Numerics.Sequences;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Race;

/// <summary>What the steps before the race say: the guard's limit, and whether the settings in use are at the cap already.</summary>
internal sealed record RaceBaseline(double Mean, double Quantile90, double Limit, int? Cap, bool AtCap, double? MeanSeconds)
{
    /// <param name="window">The steps before, oldest first.</param>
    public static RaceBaseline Of(ReadOnlySpan<RaceStep> window, int? cap, RaceOptions options)
    {
        var judged = window[Math.Min(options.StepsLeftOut, window.Length - 1)..];
        var counts = new double[judged.Length];
        double sum = 0, seconds = 0;
        for (var i = 0; i < judged.Length; i++)
        {
            counts[i] = judged[i].Count;
            sum += judged[i].Count;
            seconds += judged[i].Seconds ?? double.NaN;
            if (!judged[i].Converged) cap ??= judged[i].Count;
        }
        Array.Sort(counts);
        var p90 = Quantile.OfSorted(counts, 0.9);
        return new RaceBaseline(
            sum / counts.Length, p90, Math.Max(options.GuardFactor * p90, p90 + options.GuardMargin), cap,
            cap is { } most && p90 >= most - 1e-9, double.IsNaN(seconds) ? null : seconds / counts.Length);
    }

    public RaceGuard View => new(Limit, Quantile90, Mean, Cap, AtCap);
}
