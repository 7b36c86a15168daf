using System.Runtime.CompilerServices;
using System.Threading.Channels;
using CouplingWatch.Monitoring.Journal;

namespace CouplingWatch.Storage.Sqlite;

/// <summary>
/// The journal in one SQLite file: write-ahead log, every commit synced before it is acknowledged. One thread writes; what waits when it
/// comes round is committed together (group commit, no linger). The file is opened at the first use and again after a fault of the
/// medium. Safe for concurrent use; a second process on the same file is refused.
/// </summary>
/// <param name="folder">Data folder; made when it does not exist.</param>
/// <exception cref="JournalUnavailableException">From every method, when the file cannot be opened, read or written, with one sentence that says why.</exception>
public sealed class SqliteJournal : IJournal
{
    public const string FileName = "journal.db";

    private const int WaitingRequests = 4096;
    private const int BatchEntries = 16384;
    private const long BatchBytes = 64L * 1024 * 1024;

    private readonly Channel<AppendRequest> waiting =
        Channel.CreateBounded<AppendRequest>(new BoundedChannelOptions(WaitingRequests) { SingleReader = true, FullMode = BoundedChannelFullMode.Wait });
    private readonly TimeProvider time;
    private readonly SqliteReads reads;
    private readonly Task writing;
    private volatile bool opened;
    private long pageLimit = long.MaxValue;

    public SqliteJournal(string folder, TimeProvider? time = null)
    {
        ArgumentException.ThrowIfNullOrEmpty(folder);
        File = Path.Combine(Path.GetFullPath(folder), FileName);
        this.time = time ?? TimeProvider.System;
        reads = new SqliteReads(File);
        writing = Task.Factory.StartNew(WriteAll, CancellationToken.None, TaskCreationOptions.LongRunning, TaskScheduler.Default);
    }

    /// <summary>Full path of the file.</summary>
    public string File { get; }

    /// <inheritdoc/>
    /// <exception cref="ArgumentException">An entry does not follow the one before it; none of these entries was kept.</exception>
    public async ValueTask AppendAsync(string run, IReadOnlyList<JournalEntry> entries, CancellationToken cancel = default)
    {
        ArgumentException.ThrowIfNullOrEmpty(run);
        ArgumentNullException.ThrowIfNull(entries);
        foreach (var entry in entries)
        {
            if (entry.Order is < 0 or > JournalSchema.MaxPlace || entry.Seq > JournalSchema.MaxPlace)
                throw new ArgumentOutOfRangeException(nameof(entries), $"order {entry.Order}, seq {entry.Seq}", $"Order and seq must lie between 0 and {JournalSchema.MaxPlace}.");
        }
        if (entries.Count > 0) await WriteAsync(new AppendRequest(run, entries), cancel).ConfigureAwait(false);
    }

    public async IAsyncEnumerable<JournalEntry> ReadAsync(string run, long afterOrder = -1, [EnumeratorCancellation] CancellationToken cancel = default)
    {
        await EnsureOpenAsync(cancel).ConfigureAwait(false);
        for (var after = Math.Max(afterOrder, -1); ;)
        {
            cancel.ThrowIfCancellationRequested();
            var page = Read(() => reads.Page(run, after));
            if (page.Count == 0) yield break;
            foreach (var entry in page) yield return entry;
            after = page[^1].Order;
        }
    }

    public async ValueTask<JournalEntry?> FindAsync(string run, long seq, CancellationToken cancel = default)
    {
        await EnsureOpenAsync(cancel).ConfigureAwait(false);
        return Read(() => reads.Find(run, seq));
    }

    public async ValueTask<IReadOnlyList<JournaledRun>> RunsAsync(CancellationToken cancel = default)
    {
        await EnsureOpenAsync(cancel).ConfigureAwait(false);
        return Read(reads.Runs);
    }

    public ValueTask CheckWritableAsync(CancellationToken cancel = default) => new(WriteAsync(new AppendRequest(null, []), cancel));

    /// <summary>Writes what still waits, then closes the file.</summary>
    public async ValueTask DisposeAsync()
    {
        waiting.Writer.TryComplete();
        await writing.ConfigureAwait(false);
        reads.Close();
    }

    /// <summary>For tests of a full medium: the file may not grow beyond so many pages.</summary>
    internal void LimitPages(long? pages) => Interlocked.Exchange(ref pageLimit, pages ?? long.MaxValue);

    private async Task WriteAsync(AppendRequest request, CancellationToken cancel)
    {
        try
        {
            await waiting.Writer.WriteAsync(request, cancel).ConfigureAwait(false);
        }
        catch (ChannelClosedException closed)
        {
            throw new JournalUnavailableException($"The journal {File} is closed.", closed);
        }
        // From here on the entries may be kept, so the answer is waited for even if nobody wants it any more.
        await request.Done.ConfigureAwait(false);
    }

    private async ValueTask EnsureOpenAsync(CancellationToken cancel)
    {
        if (!opened) await CheckWritableAsync(cancel).ConfigureAwait(false);
    }

    private T Read<T>(Func<T> read)
    {
        try
        {
            return read();
        }
        catch (Exception thrown) when (SqliteFaults.Explains(thrown))
        {
            throw SqliteFaults.Explain(File, thrown);
        }
    }

    private void WriteAll()
    {
        SqliteWriter? writer = null;
        var batch = new List<AppendRequest>();
        while (waiting.Reader.WaitToReadAsync().AsTask().GetAwaiter().GetResult())
        {
            Gather(batch);
            try
            {
                writer ??= new SqliteWriter(File);
                writer.LimitPages(Interlocked.Read(ref pageLimit));
                opened = true;
                foreach (var written in writer.Commit(batch, time.GetUtcNow())) written.Succeed();
            }
            catch (Exception thrown)
            {
                writer?.Dispose();
                writer = null;
                var why = SqliteFaults.Explains(thrown) ? SqliteFaults.Explain(File, thrown) : new JournalUnavailableException($"The journal {File} cannot be used: {thrown.Message}", thrown);
                foreach (var request in batch) request.Fail(why);
            }
            batch.Clear();
        }
        writer?.Dispose();
    }

    private void Gather(List<AppendRequest> batch)
    {
        var entries = 0;
        long bytes = 0;
        while (entries < BatchEntries && bytes < BatchBytes && waiting.Reader.TryRead(out var request))
        {
            batch.Add(request);
            entries += request.Entries.Count;
            for (var i = 0; i < request.Entries.Count; i++) bytes += request.Entries[i].Body.Length;
        }
    }
}
