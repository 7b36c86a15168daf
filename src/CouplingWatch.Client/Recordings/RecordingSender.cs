using System.Buffers;
using System.IO.Pipelines;
using CouplingWatch.Client.Buffering;
using CouplingWatch.Client.Delivery;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;

namespace CouplingWatch.Client.Recordings;

/// <summary>What became of a recording that was sent.</summary>
/// <param name="Records">Records delivered, those the server had already among them.</param>
/// <param name="Problem">Why it was not delivered to its end; null when it was.</param>
public sealed record SentRecording(string Run, long Records, string? Problem);

/// <summary>
/// Sends the records of a file to a server as they stand there, byte for byte. Sending a file again, or one of which the server has a part,
/// is harmless. With <see cref="FollowAsync"/> the file may still grow, and settings come back as <c>NAME.settings.json</c> beside it.
/// </summary>
public sealed class RecordingSender
{
    private static readonly TimeSpan Look = TimeSpan.FromMilliseconds(500);

    private readonly Uri server;
    private readonly string run;
    private readonly string path;
    private readonly RunSenderOptions options;
    private readonly int tries;
    private readonly BackOff backOff;
    private readonly List<Pending> batch = [];
    private HttpDelivery? delivery;
    private string? settingsFile;
    private long next = -1;
    private long delivered;
    private int newestRevision;
    private string? problem;

    private RecordingSender(Uri server, string run, string path, RunSenderOptions options, int tries)
    {
        (this.server, this.run, this.path, this.options, this.tries) = (server, run, path, options, tries);
        backOff = new BackOff(options.FirstBackOff, options.LongestBackOff, run.Length);
    }

    /// <summary>Sends the file as it is now.</summary>
    /// <param name="tries">How often the same records are tried before it gives up.</param>
    /// <exception cref="IOException">The file cannot be read.</exception>
    public static Task<SentRecording> SendAsync(Uri server, string run, string path, RunSenderOptions? options = null, int tries = 8, CancellationToken cancel = default) =>
        Prepare(server, run, path, options, tries).RunAsync(grows: false, cancel);

    /// <summary>Sends the file and what is appended to it, until a <c>close</c> record or until cancelled.</summary>
    /// <exception cref="IOException">The file cannot be read.</exception>
    public static Task<SentRecording> FollowAsync(Uri server, string run, string path, RunSenderOptions? options = null, CancellationToken cancel = default)
    {
        var sender = Prepare(server, run, path, options, int.MaxValue);
        sender.settingsFile = Path.Combine(Path.GetDirectoryName(Path.GetFullPath(path))!, run + ".settings.json");
        return sender.RunAsync(grows: true, cancel);
    }

    private static RecordingSender Prepare(Uri server, string run, string path, RunSenderOptions? options, int tries)
    {
        ArgumentNullException.ThrowIfNull(server);
        RunName.Check(run);
        options ??= new RunSenderOptions();
        options.Check();
        return new RecordingSender(server, run, path, options, tries);
    }

    private async Task<SentRecording> RunAsync(bool grows, CancellationToken cancel)
    {
        await using var file = new FileStream(path, FileMode.Open, FileAccess.Read, FileShare.ReadWrite | FileShare.Delete, 64 * 1024, FileOptions.Asynchronous);
        Stream source = grows ? new GrowingFile(file, Look, options.Time) : file;
        var lines = NdjsonStream.ReadAsync(PipeReader.Create(source), new RecordReader(), cancel: cancel).GetAsyncEnumerator(cancel);
        try
        {
            while (problem is null)
            {
                var coming = lines.MoveNextAsync();
                // While the file has nothing new, what was read goes out.
                if (!coming.IsCompleted) await FlushAsync(cancel).ConfigureAwait(false);
                if (!await coming.ConfigureAwait(false)) break;
                Take(lines.Current);
                if (batch.Count >= options.BatchRecords || batch.Sum(b => (long)b.Line.Length) >= options.BatchBytes || lines.Current.Result.Record is CloseRecord) await FlushAsync(cancel).ConfigureAwait(false);
                if (grows && lines.Current.Result.Record is CloseRecord) break;
            }
            if (problem is null) await FlushAsync(cancel).ConfigureAwait(false);
        }
        catch (OperationCanceledException) when (grows && cancel.IsCancellationRequested)
        {
            // Following ends when it is told to.
        }
        finally
        {
            if (delivery is not null) await delivery.DisposeAsync().ConfigureAwait(false);
        }
        return new SentRecording(run, delivered, problem ?? (delivered == 0 && !grows ? "the file holds no record" : null));
    }

    private void Take(in NdjsonLine line)
    {
        if (line.Result.Record is not { } record)
        {
            // A line that is no record keeps its place in the stream; a torn last line is no line yet.
            if (line.Ended && next >= 0) Queue(new Pending(next, RecordWriter.Line(new RemarkRecord { Seq = next, Text = "unreadable: " + line.Result.Problem!.Sentence })));
            else if (line.Ended) problem = line.Result.Problem!.Sentence;
            return;
        }
        delivery ??= new HttpDelivery(server, run, (record as OpenRecord)?.Instance, options);
        if (record.Seq < 0) return;
        if (next < 0) next = record.Seq;
        if (record.Seq < next) return;
        while (next < record.Seq) Queue(new Pending(next, RecordWriter.Line(new SkippedRecord { Seq = next, Why = "missing in the file" })));
        Queue(new Pending(record.Seq, [.. line.Bytes.ToArray(), (byte)'\n']));
    }

    private void Queue(Pending entry)
    {
        batch.Add(entry);
        next = entry.Seq + 1;
    }

    private async Task FlushAsync(CancellationToken cancel)
    {
        var size = batch.Count;
        for (var tried = 0; batch.Count > 0 && problem is null;)
        {
            var part = batch.GetRange(0, Math.Min(Math.Max(size, 1), batch.Count));
            var answer = await delivery!.DeliverAsync(part, null, cancel).ConfigureAwait(false);
            await TakeSettingsAsync(answer, cancel).ConfigureAwait(false);
            var gone = answer.Next is { } upTo ? batch.RemoveAll(b => b.Seq < upTo) : answer.Outcome == DeliveryOutcome.Accepted ? RemoveFirst(part.Count) : 0;
            delivered += gone;
            if (gone > 0) tried = 0;
            if (answer.Outcome == DeliveryOutcome.Accepted && gone > 0) continue;
            if (answer.Outcome == DeliveryOutcome.TooLarge && part.Count > 1) size = part.Count / 2;
            else if (answer.Outcome is DeliveryOutcome.Refused or DeliveryOutcome.TooLarge && Replace(answer, part)) continue;
            else if (answer.Outcome is DeliveryOutcome.Never or DeliveryOutcome.Conflict or DeliveryOutcome.Refused or DeliveryOutcome.TooLarge) problem = answer.Why;
            else if (answer.Outcome == DeliveryOutcome.Gap && gone == 0) problem = answer.Why;
            else if (answer.Outcome == DeliveryOutcome.Gap) continue;
            else if (++tried >= tries) problem = $"given up after {tried} tries: {answer.Why}";
            else await WaitAsync(answer, tried, cancel).ConfigureAwait(false);
        }
        if (problem is null) backOff.Reset();
    }

    private int RemoveFirst(int count)
    {
        batch.RemoveRange(0, count);
        return count;
    }

    /// <summary>Puts a remark in the place of the refused record; false when that cannot help.</summary>
    private bool Replace(DeliveryAnswer answer, List<Pending> part)
    {
        var seq = answer.Seq ?? (part.Count == 1 ? part[0].Seq : null);
        var at = batch.FindIndex(b => b.Seq == seq);
        if (at < 0 || seq == 0) return false;
        var remark = RecordWriter.Line(new RemarkRecord { Seq = seq!.Value, Text = $"record {seq} was refused: {answer.Why}" });
        if (batch[at].Line.AsSpan().StartsWith("{\"kind\":\"remark\""u8) && batch[at].Line.Length <= remark.Length) return false;
        options.Log?.Invoke($"record {seq} was refused and is replaced by a remark: {answer.Why}");
        batch[at] = new Pending(seq.Value, remark);
        return true;
    }

    private async Task WaitAsync(DeliveryAnswer answer, int tried, CancellationToken cancel)
    {
        if (tried == 1) options.Log?.Invoke($"not delivered, will try again: {answer.Why}");
        var wait = backOff.Next();
        await Task.Delay(answer.After is { } after && after > wait ? after : wait, options.Time, cancel).ConfigureAwait(false);
    }

    private async Task TakeSettingsAsync(DeliveryAnswer answer, CancellationToken cancel)
    {
        if (settingsFile is null || answer.Revision is not { } revision || revision <= newestRevision) return;
        if (await delivery!.ReadSettingsAsync(cancel).ConfigureAwait(false) is not { } settings) return;
        SettingsFile.Write(settingsFile, settings);
        newestRevision = settings.Revision;
    }
}
