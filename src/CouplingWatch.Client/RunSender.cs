using System.Security.Cryptography;
using CouplingWatch.Client.Buffering;
using CouplingWatch.Client.Delivery;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Client;

/// <summary>
/// What a coupled code links to send its residual stream and take settings. <see cref="Send"/> never waits for the server: records are
/// numbered, buffered within a bound, sent in batches by a task of its own, sent again after a fault, and replaced by a remark when refused.
/// Without a server they go to <c>NAME.ndjson</c>. Safe for concurrent use.
/// </summary>
public sealed class RunSender : IAsyncDisposable
{
    private readonly RunSenderOptions options;
    private readonly Outbox outbox;
    private readonly IDelivery delivery;
    private readonly SendingLoop loop;
    private readonly SolverClock inside;
    private readonly CancellationTokenSource stop = new();
    private readonly Task running;
    private volatile bool finishing;
    private int disposed;

    private RunSender(Uri? server, string run, OpenRecord open, RunSenderOptions options)
    {
        this.options = options;
        Run = run;
        Instance = open.Instance ?? Convert.ToHexStringLower(RandomNumberGenerator.GetBytes(8));
        outbox = new Outbox(options.BufferBytes);
        delivery = server is null ? new FileDelivery(run, options) : new HttpDelivery(server, run, Instance, options);
        inside = new SolverClock(options.Time);
        loop = new SendingLoop(outbox, delivery, options, open.BeatSeconds, inside, BitConverter.ToInt32(SHA256.HashData(System.Text.Encoding.UTF8.GetBytes(Instance))));
        Send(open with { Instance = Instance });
        running = Task.Run(() => loop.RunAsync(() => finishing, stop.Token));
    }

    /// <summary>Opens a run and begins to send.</summary>
    /// <param name="server">Root address of the server; null: write to a file instead.</param>
    /// <param name="run">1–64 of <c>a-z0-9-_.</c>, beginning with a letter or digit.</param>
    /// <param name="open">The first record; its instance is made up when it has none.</param>
    /// <exception cref="ArgumentException">The name or an option is not allowed.</exception>
    /// <exception cref="IOException">No server is given and no file can be made.</exception>
    public static RunSender Start(Uri? server, string run, OpenRecord open, RunSenderOptions? options = null)
    {
        ArgumentNullException.ThrowIfNull(open);
        RunName.Check(run);
        if (server is { IsAbsoluteUri: false }) throw new ArgumentException($"The server's address must be absolute, such as http://127.0.0.1:5000, not {server}.", nameof(server));
        options ??= new RunSenderOptions();
        options.Check();
        return new RunSender(server, run, open, options);
    }

    public string Run { get; }

    public string Instance { get; }

    /// <summary>Newest settings revision the server has told of; 0 as long as only the declared settings exist.</summary>
    public int NewestRevision => loop.NewestRevision;

    /// <summary>Records not acknowledged yet.</summary>
    public int Pending => outbox.Count;

    /// <summary>Iterations dropped so far because the server did not answer and the buffer was full.</summary>
    public long Skipped => outbox.Skipped;

    /// <summary>Why nothing more is delivered (the run's name is taken or closed); null otherwise.</summary>
    public string? GivenUp => loop.GivenUp;

    /// <summary>The file written to; null when there is a server.</summary>
    public string? FileName => (delivery as FileDelivery)?.FileName;

    /// <summary>
    /// Hands over a record; its seq is set here, and its time when it has none. Returns at once: the cost is that of writing the line into
    /// memory (about 1 ms for two vectors of 100,000). After the end it does nothing.
    /// </summary>
    /// <returns>False when the record was dropped: the buffer is full or sending has ended.</returns>
    public bool Send(StreamRecord record)
    {
        ArgumentNullException.ThrowIfNull(record);
        if (finishing || loop.GivenUp is not null) return false;
        var kept = outbox.Add(record.At is null ? record with { At = options.Time.GetUtcNow() } : record);
        loop.Wake();
        return kept;
    }

    /// <summary>Says inside which solver the run is from now on; null: in none. It stands in the beats sent while nothing else is.</summary>
    public void Enter(string? solver) => inside.Enter(solver);

    /// <summary>The newest settings revision, or null when it cannot be read now.</summary>
    public Task<SettingsRevision?> ReadSettingsAsync(CancellationToken cancel = default) => delivery.ReadSettingsAsync(cancel);

    /// <summary>Sends the <c>close</c> record and waits until everything is delivered, at most <see cref="RunSenderOptions.CloseTimeout"/>.</summary>
    /// <returns>True when everything was delivered.</returns>
    public async Task<bool> CloseAsync(CloseOutcome outcome, string? reason = null)
    {
        Send(new CloseRecord { Outcome = outcome, Reason = reason });
        await DisposeAsync().ConfigureAwait(false);
        return outbox.Count == 0;
    }

    /// <summary>Waits until everything is delivered, at most <see cref="RunSenderOptions.CloseTimeout"/>, and ends. Sends no <c>close</c>.</summary>
    public async ValueTask DisposeAsync()
    {
        if (Interlocked.Exchange(ref disposed, 1) != 0)
        {
            await running.ConfigureAwait(ConfigureAwaitOptions.SuppressThrowing);
            return;
        }
        finishing = true;
        loop.Hurry();
        using var limit = new CancellationTokenSource(options.CloseTimeout, options.Time);
        await using (limit.Token.Register(stop.Cancel).ConfigureAwait(false))
            await running.ConfigureAwait(ConfigureAwaitOptions.SuppressThrowing);
        await delivery.DisposeAsync().ConfigureAwait(false);
        if (outbox.Count > 0) KeepUnsent();
        stop.Dispose();
    }

    /// <summary>What was not delivered, so that it can be sent later.</summary>
    private void KeepUnsent()
    {
        if (options.Folder is null)
        {
            options.Log?.Invoke($"{outbox.Count} records were not delivered");
            return;
        }
        var path = Path.Combine(Path.GetFullPath(options.Folder), Run + ".unsent.ndjson");
        Directory.CreateDirectory(Path.GetDirectoryName(path)!);
        using var file = new FileStream(path, FileMode.Create, FileAccess.Write);
        foreach (var entry in outbox.Peek(int.MaxValue, long.MaxValue)) file.Write(entry.Line);
        options.Log?.Invoke($"{outbox.Count} records were not delivered; they are kept in {path}");
    }
}
