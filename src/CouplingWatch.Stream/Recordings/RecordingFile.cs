using System.Buffers;
using System.IO.Pipelines;
using System.Runtime.CompilerServices;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;

namespace CouplingWatch.Recordings;

/// <summary>
/// Reads a recording (<c>NAME.ndjson</c>) from its beginning to its end, streaming: memory does not grow with the file.
/// What a crash leaves behind is tolerated and noted: a half-written last line, blocks of NUL bytes, records sent twice, gaps.
/// </summary>
public static class RecordingFile
{
    private const int BufferBytes = 256 * 1024;
    private const long ProgressBytes = 4 * 1024 * 1024;

    /// <exception cref="IOException">The file cannot be read.</exception>
    /// <exception cref="UnauthorizedAccessException">The file may not be read.</exception>
    public static async IAsyncEnumerable<RecordingItem> ReadAsync(string path, IProgress<RecordingProgress>? progress = null, [EnumeratorCancellation] CancellationToken cancel = default)
    {
        var file = new FileStream(path, FileMode.Open, FileAccess.Read, FileShare.ReadWrite | FileShare.Delete, 1, FileOptions.SequentialScan);
        await using (file.ConfigureAwait(false))
        {
            await foreach (var item in ReadAsync(file, progress, cancel).ConfigureAwait(false)) yield return item;
        }
    }

    /// <summary>Reads a recording from an open stream, which is left open.</summary>
    public static async IAsyncEnumerable<RecordingItem> ReadAsync(Stream stream, IProgress<RecordingProgress>? progress = null, [EnumeratorCancellation] CancellationToken cancel = default)
    {
        ArgumentNullException.ThrowIfNull(stream);
        var total = stream.CanSeek ? stream.Length : 0;
        var pipe = PipeReader.Create(stream, new StreamPipeReaderOptions(bufferSize: BufferBytes, minimumReadSize: BufferBytes / 4, leaveOpen: true));
        var reader = new RecordReader();
        var order = new SeqOrder();
        var clock = DateTimeOffset.UnixEpoch;
        long bytes = 0, reported = 0, lines = 0;
        await foreach (var line in NdjsonStream.ReadAsync(pipe, reader, cancel: cancel).ConfigureAwait(false))
        {
            bytes += line.Bytes.Length + 1;
            lines = line.Number;
            if (progress is not null && bytes - reported >= ProgressBytes)
            {
                reported = bytes;
                progress.Report(new RecordingProgress(stream.CanSeek ? stream.Position : bytes, total, lines));
            }
            var (result, note) = Tolerate(line, reader);
            if (note is not null) yield return new RecordingItem(line.Number, clock, null, note, null);
            if (result.Problem is { } problem) yield return new RecordingItem(line.Number, clock, null, null, problem);
            if (result.Record is not { } record) continue;
            if (order.Next == 0 && record is not (OpenRecord or BeatRecord))
            {
                var missing = new RecordProblem(line.Number, "kind", "the open record first", $"\"{record.Kind}\"", ProblemCodes.MissingOpen);
                yield return new RecordingItem(line.Number, clock, null, null, missing);
                yield break;
            }
            var expected = order.Next;
            var place = order.Take(record.Seq, line.Bytes);
            if (place == SeqPlace.Resent)
            {
                yield return new RecordingItem(line.Number, clock, null, new RecordingNote(RecordingNoteKind.Resent, $"record {record.Seq} again"), null);
                continue;
            }
            if (place == SeqPlace.Conflict)
            {
                var conflict = new RecordProblem(line.Number, "seq", $"{expected} (a seq stands for one record only)", $"{record.Seq} with other content", ProblemCodes.SeqConflict);
                yield return new RecordingItem(line.Number, clock, null, null, conflict);
                continue;
            }
            if (place == SeqPlace.Gap)
                yield return new RecordingItem(line.Number, clock, null, new RecordingNote(RecordingNoteKind.Gap, $"records {expected} to {record.Seq - 1} are missing"), null);
            clock = record.At ?? clock;
            yield return new RecordingItem(line.Number, clock, record, null, null);
        }
        await pipe.CompleteAsync().ConfigureAwait(false);
        progress?.Report(new RecordingProgress(stream.CanSeek ? stream.Position : bytes, total, lines));
    }

    /// <summary>A line that does not parse may be what a crash left: NUL bytes, or a last line cut off.</summary>
    private static (RecordResult Result, RecordingNote? Note) Tolerate(in NdjsonLine line, RecordReader reader)
    {
        if (line.Result.Problem is null || line.Bytes.IsEmpty) return (line.Result, null);
        if (line.Bytes.PositionOf((byte)0) is not null)
        {
            var whole = line.Bytes.ToArray();
            var rest = whole.AsSpan(whole.AsSpan().TrimEnd((byte)0).LastIndexOf((byte)0) + 1).TrimEnd((byte)0);
            var second = reader.Read(rest, line.Number);
            var note = new RecordingNote(RecordingNoteKind.NulBlock, $"{whole.Length - rest.Length} damaged bytes passed over");
            return (second.Problem is null ? second : default, note);
        }
        if (!line.Ended && line.Result.Problem.Code == ProblemCodes.Malformed)
            return (default, new RecordingNote(RecordingNoteKind.TornTail, $"the last line ends after {line.Bytes.Length} bytes"));
        return (line.Result, null);
    }
}
