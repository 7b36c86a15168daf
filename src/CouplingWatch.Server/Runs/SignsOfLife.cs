using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Runs;

/// <summary>What the server sees of a run by its own clock: silence, the end of a silence, and a solver that does not come back. The limits are the monitor's.</summary>
internal sealed class SignsOfLife
{
    private DateTimeOffset? lastRecord;
    private DateTimeOffset? lastSign;
    private bool beats;
    private string? hanging;

    /// <summary>When a journaled record came last, by the server's clock; null before the first.</summary>
    public DateTimeOffset? LastReceived { get; private set; }

    public bool Silent { get; private set; }

    /// <summary>Takes note of a journaled record; whether a silence ends with it is asked of <see cref="EndOfSilence"/> before.</summary>
    public void Record(StreamRecord record, DateTimeOffset received)
    {
        LastReceived = received;
        lastRecord = received;
        lastSign = received;
        if (record is IterationRecord) hanging = null;
    }

    /// <summary>Takes over an event that is in the journal.</summary>
    public void Observe(ServerEvent serverEvent)
    {
        if (serverEvent is SilentEvent) Silent = true;
        if (serverEvent is BackEvent) Silent = false;
        if (serverEvent is HangEvent hang) hanging = hang.Solver;
    }

    /// <summary>A restarted server gives every run a full limit from its own start: it did not listen in between.</summary>
    public void ListenFrom(DateTimeOffset now)
    {
        lastRecord = lastRecord is null ? null : now;
        lastSign = lastSign is null ? null : now;
    }

    /// <summary>The event that goes before the next sign of life; null when the run was not silent.</summary>
    public BackEvent? EndOfSilence(DateTimeOffset now) =>
        Silent && lastSign is { } last ? new BackEvent((now - last).TotalSeconds) { At = now } : null;

    /// <summary>
    /// The event of a silence that began; null while there is none. A run that beats is heard from by its beats; one that declared them and
    /// sends none, by its records with the longer of the two limits.
    /// </summary>
    /// <param name="limitSeconds">On the gap between records; null while too few gaps are known.</param>
    /// <param name="beatLimitSeconds">On the gap between beats; null when none were declared.</param>
    public SilentEvent? BeginningOfSilence(double? limitSeconds, double? beatLimitSeconds, DateTimeOffset now)
    {
        if (Silent || lastSign is not { } sign || lastRecord is not { } record) return null;
        var (since, limit) = beatLimitSeconds is { } beatLimit
            ? (sign, beats ? beatLimit : Math.Max(beatLimit, limitSeconds ?? 0))
            : (record, limitSeconds ?? double.PositiveInfinity);
        var gap = (now - since).TotalSeconds;
        return gap > limit ? new SilentEvent(gap, limit) { At = now } : null;
    }

    /// <summary>Takes note of a beat; the event when a solver is inside for longer than its limit, once a pass.</summary>
    public HangEvent? Beat(BeatRecord beat, Func<string, double> limitSeconds, DateTimeOffset now)
    {
        lastSign = now;
        beats = true;
        if (beat.In is not { } solver || beat.InsideSeconds is not { } inside || solver == hanging) return null;
        var limit = limitSeconds(solver);
        return inside > limit ? new HangEvent(solver, inside, limit) { At = now } : null;
    }
}
