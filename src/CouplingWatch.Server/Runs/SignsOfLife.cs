using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Runs;

/// <summary>What the server sees of a run by its own clock: silence, the end of a silence, and a solver that does not come back.</summary>
internal sealed class SignsOfLife
{
    /// <summary>A solver counts as hanging only after this long inside it.</summary>
    public const double HangFloorSeconds = 600;
    /// <summary>… and after this multiple of its longest recent pass.</summary>
    public const double HangFactor = 3;
    /// <summary>Beats missed before a run that declared them counts as silent.</summary>
    public const int BeatsMissed = 3;
    private const int Passes = 50;

    private readonly Dictionary<string, Queue<double>> passSeconds = new(StringComparer.Ordinal);
    private DateTimeOffset? lastRecord;
    private DateTimeOffset? lastSign;
    private double? beatSeconds;
    private string? hanging;
    private bool beats;

    /// <summary>When a record or a beat came last, by the server's clock; null before the first.</summary>
    public DateTimeOffset? Last => lastSign;

    public bool Silent { get; private set; }

    /// <summary>Takes note of a journaled record; whether a silence ends with it is asked of <see cref="EndOfSilence"/> before.</summary>
    public void Record(StreamRecord record, DateTimeOffset received)
    {
        lastRecord = received;
        lastSign = received;
        if (record is OpenRecord open) beatSeconds = open.BeatSeconds;
        if (record is not IterationRecord { Seconds: { } seconds }) return;
        hanging = null;
        foreach (var (solver, value) in seconds)
        {
            if (!passSeconds.TryGetValue(solver, out var window)) passSeconds[solver] = window = new Queue<double>(Passes);
            if (window.Count == Passes) window.Dequeue();
            if (double.IsFinite(value)) window.Enqueue(value);
        }
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

    /// <summary>The event that goes before the next record; null when the run was not silent.</summary>
    public BackEvent? EndOfSilence(DateTimeOffset now) =>
        Silent && lastSign is { } last ? new BackEvent((now - last).TotalSeconds) { At = now } : null;

    /// <summary>The event of a silence that began; null while there is none.</summary>
    /// <param name="limitSeconds">The monitor's limit on the gap between records; null while it knows too few gaps.</param>
    public SilentEvent? BeginningOfSilence(double? limitSeconds, DateTimeOffset now)
    {
        if (Silent || lastSign is not { } sign || lastRecord is not { } record) return null;
        // A run that beats is heard from by its beats; one that declared them and sends none, by its records with the longer limit.
        var (since, limit) = beatSeconds is { } beat and > 0
            ? (sign, beats ? BeatsMissed * beat : Math.Max(BeatsMissed * beat, limitSeconds ?? 0))
            : (record, limitSeconds ?? double.PositiveInfinity);
        var gap = (now - since).TotalSeconds;
        return gap > limit ? new SilentEvent(gap, limit) { At = now } : null;
    }

    /// <summary>Takes note of a beat; the event when a solver is inside for too long, once a pass.</summary>
    public HangEvent? Beat(BeatRecord beat, DateTimeOffset now)
    {
        lastSign = now;
        beats = true;
        if (beat.In is not { } solver || beat.InsideSeconds is not { } inside || solver == hanging) return null;
        var limit = Math.Max(HangFloorSeconds, HangFactor * (passSeconds.TryGetValue(solver, out var window) && window.Count > 0 ? window.Max() : 0));
        return inside > limit ? new HangEvent(solver, inside, limit) { At = now } : null;
    }
}
