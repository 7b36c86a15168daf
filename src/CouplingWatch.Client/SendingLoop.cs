using CouplingWatch.Client.Buffering;
using CouplingWatch.Client.Delivery;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;

namespace CouplingWatch.Client;

/// <summary>Carries what the outbox holds to where it goes: one batch at a time, the same again after a fault, on past what is refused.</summary>
internal sealed class SendingLoop(Outbox outbox, IDelivery delivery, RunSenderOptions options, double? beatSeconds, SolverClock inside, int seed)
{
    private readonly Signal wake = new();
    private readonly HashSet<long> refused = [];
    private readonly BackOff backOff = new(options.FirstBackOff, options.LongestBackOff, seed);
    private int mostRecords = options.BatchRecords;
    private long lastPost = options.Time.GetTimestamp() - (10 * options.Time.TimestampFrequency);
    private bool wasFaulty;
    private volatile bool hurried;

    public int NewestRevision { get; private set; }

    /// <summary>Why nothing more will be delivered; null as long as it may be.</summary>
    public string? GivenUp { get; private set; }

    public void Wake() => wake.Set();

    /// <summary>Leaves out the gathering from here on.</summary>
    public void Hurry()
    {
        hurried = true;
        wake.Set();
    }

    /// <summary>Runs until cancelled, or until asked to finish and everything is delivered, or nothing ever will be.</summary>
    public async Task RunAsync(Func<bool> finishing, CancellationToken cancel)
    {
        try
        {
            await SendAllAsync(finishing, cancel).ConfigureAwait(false);
        }
        catch (Exception thrown) when (thrown is not OperationCanceledException)
        {
            // A sender must not take its solver down; the run goes on unwatched and says so.
            GiveUp(new DeliveryAnswer(DeliveryOutcome.Never, Why: $"the sender failed: {thrown.Message}"));
        }
    }

    private async Task SendAllAsync(Func<bool> finishing, CancellationToken cancel)
    {
        while (GivenUp is null)
        {
            if (outbox.Count == 0)
            {
                if (finishing()) return;
                var quiet = !await wake.WaitAsync(BeatDue(), options.Time, cancel).ConfigureAwait(false);
                if (outbox.Count == 0 && !quiet) continue;
            }
            await GatherAsync(cancel).ConfigureAwait(false);
            var batch = outbox.Peek(mostRecords, options.BatchBytes);
            lastPost = options.Time.GetTimestamp();
            var answer = await delivery.DeliverAsync(batch, batch.Count == 0 ? Beat() : null, cancel).ConfigureAwait(false);
            if (Take(answer, batch) is { } wait) await WaitAsync(wait, cancel).ConfigureAwait(false);
        }
    }

    /// <summary>Acts on an answer; the time to wait before the next post, null for none.</summary>
    private TimeSpan? Take(DeliveryAnswer answer, List<Pending> batch)
    {
        if (answer.Revision is { } revision) NewestRevision = Math.Max(NewestRevision, revision);
        if (answer.Outcome == DeliveryOutcome.Later) return Postpone(answer);
        backOff.Reset();
        if (wasFaulty) options.Log?.Invoke("the server answers again");
        wasFaulty = false;
        var next = answer.Next ?? (answer.Outcome == DeliveryOutcome.Accepted && batch.Count > 0 ? batch[^1].Seq + 1 : -1);
        if (next >= 0) outbox.Acknowledge(next);
        switch (answer.Outcome)
        {
            case DeliveryOutcome.Accepted:
                mostRecords = Math.Min(options.BatchRecords, 2 * mostRecords);
                // An answer that moves nothing on must not become a busy loop.
                return batch.Count > 0 && next <= batch[0].Seq ? Postpone(answer with { Why = $"the server answered with next {next}" }) : null;
            case DeliveryOutcome.Gap:
                if (batch.Count == 0 || next < 0 || next == batch[0].Seq) return Postpone(answer);
                return next < batch[0].Seq ? Fill(next, batch[0].Seq) : null;
            case DeliveryOutcome.Conflict:
                return PassOver(answer, batch);
            case DeliveryOutcome.Refused:
                return Replace(answer, batch);
            case DeliveryOutcome.TooLarge when batch.Count > 1:
                mostRecords = Math.Max(1, batch.Count / 2);
                return null;
            case DeliveryOutcome.TooLarge:
                return Replace(answer, batch);
            default:
                return GiveUp(answer);
        }
    }

    private TimeSpan Postpone(DeliveryAnswer answer)
    {
        if (!wasFaulty) options.Log?.Invoke($"not delivered, will try again: {answer.Why}");
        wasFaulty = true;
        var wait = backOff.Next();
        return answer.After is { } after && after > wait ? (after < TimeSpan.FromMinutes(5) ? after : TimeSpan.FromMinutes(5)) : wait;
    }

    private TimeSpan? Fill(long next, long first)
    {
        options.Log?.Invoke($"the server lost records {next} to {first - 1}; they are marked as skipped");
        outbox.FillFrom(next);
        return null;
    }

    /// <summary>The other side keeps its own record under this seq; ours is let go of.</summary>
    private TimeSpan? PassOver(DeliveryAnswer answer, List<Pending> batch)
    {
        options.Log?.Invoke($"a record was not taken: {answer.Why}");
        outbox.Acknowledge((answer.Seq ?? (batch.Count > 0 ? batch[0].Seq : -1)) + 1);
        return null;
    }

    private TimeSpan? Replace(DeliveryAnswer answer, List<Pending> batch)
    {
        var seq = answer.Seq ?? (batch.Count == 1 ? batch[0].Seq : null);
        if (seq is null)
        {
            // The answer does not say which record it means: one at a time, until it is found.
            if (batch.Count == 0) return Postpone(answer);
            mostRecords = 1;
            return null;
        }
        // A run cannot begin with a remark in the place of its open record.
        if (seq == 0) return GiveUp(answer);
        options.Log?.Invoke($"record {seq} was refused and is replaced by a remark: {answer.Why}");
        if (!refused.Add(seq.Value)) return Postpone(answer);
        outbox.Replace(seq.Value, $"record {seq} was refused: {answer.Why}");
        return null;
    }

    private TimeSpan? GiveUp(DeliveryAnswer answer)
    {
        GivenUp = answer.Why ?? "refused";
        options.Log?.Invoke($"sending ends: {GivenUp}");
        return null;
    }

    private async Task GatherAsync(CancellationToken cancel)
    {
        while (!hurried && options.Linger - options.Time.GetElapsedTime(lastPost) is { } rest && rest > TimeSpan.Zero && outbox.Bytes < options.BatchBytes)
            await wake.WaitAsync(rest, options.Time, cancel).ConfigureAwait(false);
    }

    private async Task WaitAsync(TimeSpan wait, CancellationToken cancel)
    {
        var since = options.Time.GetTimestamp();
        while (wait - options.Time.GetElapsedTime(since) is { } rest && rest > TimeSpan.Zero)
            await wake.WaitAsync(rest, options.Time, cancel).ConfigureAwait(false);
    }

    private TimeSpan? BeatDue()
    {
        if (beatSeconds is not { } seconds || seconds <= 0) return null;
        var rest = TimeSpan.FromSeconds(seconds) - options.Time.GetElapsedTime(lastPost);
        return rest > TimeSpan.Zero ? rest : TimeSpan.Zero;
    }

    private byte[] Beat()
    {
        var (solver, since) = inside.Now;
        return RecordWriter.Line(new BeatRecord { At = options.Time.GetUtcNow(), In = solver, InsideSeconds = solver is null ? null : options.Time.GetElapsedTime(since).TotalSeconds });
    }
}
