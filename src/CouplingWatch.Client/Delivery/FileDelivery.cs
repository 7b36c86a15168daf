using System.Text.Json;
using CouplingWatch.Client.Buffering;
using CouplingWatch.Wire;

namespace CouplingWatch.Client.Delivery;

/// <summary>
/// Appends records to <c>NAME.ndjson</c> (<c>NAME.2.ndjson</c> and so on when that exists), handed to the system at once and synced to the medium every
/// five seconds. Settings come back as <c>NAME.settings.json</c>.
/// </summary>
internal sealed class FileDelivery : IDelivery
{
    private static readonly TimeSpan SyncEvery = TimeSpan.FromSeconds(5);

    private readonly string settings;
    private readonly TimeProvider time;
    private readonly FileStream file;
    private long syncedAt;

    /// <exception cref="IOException">No file can be made there.</exception>
    public FileDelivery(string run, RunSenderOptions options)
    {
        var folder = Path.GetFullPath(options.Folder ?? ".");
        Directory.CreateDirectory(folder);
        settings = Path.Combine(folder, run + ".settings.json");
        time = options.Time;
        file = Create(folder, run);
        syncedAt = time.GetTimestamp();
    }

    public string FileName => file.Name;

    public async Task<DeliveryAnswer> DeliverAsync(IReadOnlyList<Pending> batch, byte[]? beat, CancellationToken cancel)
    {
        var start = file.Position;
        try
        {
            foreach (var entry in batch) await file.WriteAsync(entry.Line, cancel).ConfigureAwait(false);
            if (beat is not null) await file.WriteAsync(beat, cancel).ConfigureAwait(false);
            var sync = time.GetElapsedTime(syncedAt) >= SyncEvery;
            file.Flush(flushToDisk: sync);
            if (sync) syncedAt = time.GetTimestamp();
            return new DeliveryAnswer(DeliveryOutcome.Accepted, batch.Count == 0 ? null : batch[^1].Seq + 1, await NewestRevisionAsync(cancel).ConfigureAwait(false));
        }
        catch (IOException thrown)
        {
            // A part of the batch may stand there; the whole of it is written again from where it began.
            file.SetLength(start);
            file.Position = start;
            return new DeliveryAnswer(DeliveryOutcome.Later, Why: thrown.Message);
        }
    }

    public async Task<SettingsRevision?> ReadSettingsAsync(CancellationToken cancel)
    {
        try
        {
            return JsonSerializer.Deserialize<SettingsRevision>(await File.ReadAllBytesAsync(settings, cancel).ConfigureAwait(false), WireJson.Options);
        }
        catch (Exception thrown) when (thrown is IOException or JsonException or UnauthorizedAccessException)
        {
            return null;
        }
    }

    public async ValueTask DisposeAsync()
    {
        file.Flush(flushToDisk: true);
        await file.DisposeAsync().ConfigureAwait(false);
    }

    private async Task<int?> NewestRevisionAsync(CancellationToken cancel) =>
        File.Exists(settings) ? (await ReadSettingsAsync(cancel).ConfigureAwait(false))?.Revision : null;

    private static FileStream Create(string folder, string run)
    {
        for (var part = 1; ; part++)
        {
            var path = Path.Combine(folder, part == 1 ? $"{run}.ndjson" : $"{run}.{part}.ndjson");
            if (!File.Exists(path)) return new FileStream(path, FileMode.CreateNew, FileAccess.Write, FileShare.Read, 64 * 1024);
        }
    }
}
