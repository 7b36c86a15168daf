using CouplingWatch.Monitoring.Statistics;

namespace CouplingWatch.Monitoring.State;

/// <summary>The gaps between records, and from which length on a gap is silence.</summary>
internal sealed class Cadence
{
    public const int GapsKept = 50;
    public const int LeastGaps = 5;
    public const double LeastSilenceSeconds = 60;
    public const double TimesTheMedian = 10;

    private readonly Window gaps = new(GapsKept);
    private bool senderHasClock;
    private double? limit;
    private double excused;

    /// <summary>Time of the latest record: the sender's where it has one, else the server's receipt.</summary>
    public DateTimeOffset? LastAt { get; private set; }

    /// <summary>Seconds without a record that count as silence; null while too few gaps are known.</summary>
    public double? LimitSeconds => gaps.Count < LeastGaps ? null : limit ??= Math.Max(LeastSilenceSeconds, TimesTheMedian * Robust.Median(gaps, GapsKept));

    /// <summary>Notes the time of a record.</summary>
    /// <param name="busy">Seconds the record says it spent on something else than a pass (a checkpoint); they are no silence.</param>
    /// <returns>The length of the gap before it when that was silence; null otherwise.</returns>
    public double? Observe(DateTimeOffset? sent, DateTimeOffset received, double busy = 0)
    {
        if (busy > 0 && double.IsFinite(busy)) excused += busy;
        if (sent is not null && !senderHasClock)
        {
            senderHasClock = true;
            LastAt = null;
        }
        var at = senderHasClock ? sent : received;
        if (at is not { } now) return null;
        var before = LastAt;
        LastAt = now;
        if (before is not { } then) return null;
        var gap = (now - then).TotalSeconds - excused;
        excused = 0;
        if (!(gap >= 0)) return null;
        if (LimitSeconds is { } silence && gap > silence) return gap;
        gaps.Add(gap);
        limit = null;
        return null;
    }
}
