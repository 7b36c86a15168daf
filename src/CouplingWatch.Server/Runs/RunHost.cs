using System.Text.Json;
using System.Threading.Channels;
using CouplingWatch.Monitoring;
using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Monitoring.Rehearsal;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;
using CouplingWatch.Server.Problems;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Runs;

/// <summary>
/// One run: everything that happens to it is handled here, one thing at a time. A record is written down, then judged, then told of.
/// Safe for concurrent callers; they wait in a queue.
/// </summary>
internal sealed partial class RunHost : IAsyncDisposable
{
    /// <summary>Batches that may wait before senders are asked to come back later.</summary>
    public const int WaitingBatches = 32;
    private readonly RunSurroundings around;
    private readonly ILogger log;
    private readonly bool journaled;
    private readonly Channel<Func<ValueTask>> work = Channel.CreateUnbounded<Func<ValueTask>>(new UnboundedChannelOptions { SingleReader = true });
    private readonly Task loop;
    private RunSequence sequence;
    private SignsOfLife signs = new();
    private RecentSteps recent = new(RehearsalTape.MostSteps);
    private RunJudge? judge;
    private volatile bool loaded;
    private StreamShape? shape;
    private TaskCompletionSource revisionChanged = NewSignal();
    private readonly Dictionary<int, int> fallBacks = [];
    private readonly List<int> stepsToReview = [];
    private long nextOrder;
    private long version;
    private int revision;
    private int waitingBatches;

    /// <param name="journaled">The journal has records of it.</param>
    public RunHost(string run, RunSurroundings around, bool journaled = false)
    {
        this.journaled = journaled;
        Run = run;
        this.around = around;
        log = around.Log;
        sequence = new RunSequence(run, around.Journal);
        loop = Task.Run(LoopAsync);
    }

    public string Run { get; }

    /// <summary>Grows with everything that changes the run; read from any thread.</summary>
    public long Version => Interlocked.Read(ref version);

    /// <summary>Newest settings revision; read from any thread.</summary>
    public int Revision => Volatile.Read(ref revision);

    /// <summary>Lengths known of the run's vectors, for the next post's reader; null before <c>open</c>.</summary>
    public StreamShape? Shape => Volatile.Read(ref shape);

    /// <summary>Ends when another settings revision is published.</summary>
    public Task RevisionChanged => Volatile.Read(ref revisionChanged).Task;

    /// <summary>Who sends; null when it did not say.</summary>
    public string? Instance => sequence.Instance;

    /// <summary>What the run declared; null before its first record.</summary>
    public OpenRecord? Open { get; private set; }

    /// <summary>True after a <c>close</c> record.</summary>
    public bool Closed { get; private set; }

    /// <summary>Seq expected next, as of the latest batch; read from any thread.</summary>
    public long NextSeq => sequence.Next;

    /// <summary>True once a record is in the journal, also while it was not read yet.</summary>
    public bool Begun => journaled || sequence.Next > 0;

    /// <summary>When a journaled record came last; null before the first.</summary>
    public DateTimeOffset? LastReceived => signs.LastReceived;

    /// <summary>The server's clock, as it goes into the journal.</summary>
    public DateTimeOffset Now => around.Now();

    /// <summary>Writes a batch down, judges it and answers what comes next. A second fault is impossible: it stops at the first.</summary>
    public async Task<IntakeAnswer> AcceptAsync(IReadOnlyList<IncomingRecord> batch, string? instance, CancellationToken cancel = default)
    {
        if (Interlocked.Increment(ref waitingBatches) > WaitingBatches)
        {
            Interlocked.Decrement(ref waitingBatches);
            return new IntakeAnswer(sequence.Next, Revision, new(Problem.Busy, $"{WaitingBatches} posts of run {Run} are waiting to be written down.", RetryAfterSeconds: 1));
        }
        try { return await QueueAsync(() => AcceptNowAsync(batch, instance, cancel), cancel); }
        finally { Interlocked.Decrement(ref waitingBatches); }
    }

    /// <summary>Asks the judgement something, between two records.</summary>
    /// <param name="otherwise">The answer when the judgement stopped on a fault of its own.</param>
    public Task<T> AskAsync<T>(Func<RunMonitor, T> question, T otherwise, CancellationToken cancel = default) => QueueAsync(async () =>
    {
        await LoadAsync(cancel);
        return judge!.Ask(question, otherwise);
    }, cancel);

    /// <summary>Journals an event when <paramref name="decide"/> answers one, and judges it; what it answers goes to the caller.</summary>
    public Task<T> DecideAsync<T>(Func<RunHost, RunMonitor, (ServerEvent? Event, T Answer)> decide, CancellationToken cancel = default) => QueueAsync(async () =>
    {
        await LoadAsync(cancel);
        var (serverEvent, answer) = decide(this, judge!.Monitor);
        if (serverEvent is not null) await CommitAsync(serverEvent, cancel);
        return answer;
    }, cancel);

    /// <summary>From which seq on the latest steps lie whole (null: from the first record), and what was in force there.</summary>
    public Task<(long? From, IReadOnlyList<StreamRecord> InForce)> RecentStepsAsync(CancellationToken cancel = default) => QueueAsync(async () =>
    {
        await LoadAsync(cancel);
        return (recent.From, recent.From is { } from ? recent.InForceAt(from) : []);
    }, cancel);

    /// <summary>Reads the journal now when it was not read yet; done at once when it was, without waiting behind posts that are being written down.</summary>
    public Task EnsureLoadedAsync(CancellationToken cancel = default) => loaded ? Task.CompletedTask : QueueAsync(async () =>
    {
        await LoadAsync(cancel);
        return true;
    }, cancel);

    private async Task LoopAsync()
    {
        await foreach (var step in work.Reader.ReadAllAsync()) await step();
    }

    /// <summary>Waits for its turn and answers; an exception goes to the caller and leaves the host standing.</summary>
    private async Task<T> QueueAsync<T>(Func<ValueTask<T>> step, CancellationToken cancel)
    {
        var done = new TaskCompletionSource<T>(TaskCreationOptions.RunContinuationsAsynchronously);
        var queued = work.Writer.TryWrite(async () =>
        {
            if (cancel.IsCancellationRequested)
            {
                done.TrySetCanceled(cancel);
                return;
            }
            try { done.TrySetResult(await step()); }
            catch (Exception e) { done.TrySetException(e); }
        });
        if (!queued) throw new ObjectDisposedException(nameof(RunHost), $"Run {Run}: the server is stopping.");
        return await done.Task;
    }

    private static TaskCompletionSource NewSignal() => new(TaskCreationOptions.RunContinuationsAsynchronously);

    public async ValueTask DisposeAsync()
    {
        work.Writer.TryComplete();
        await loop;
    }
}
