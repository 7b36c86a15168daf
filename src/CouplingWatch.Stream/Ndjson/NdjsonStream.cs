using System.Buffers;
using System.IO.Pipelines;
using System.Runtime.CompilerServices;

namespace CouplingWatch.Ndjson;

/// <summary>One line cut from a stream: its number from 1, its bytes as received without the line end, and what it is.</summary>
/// <param name="Bytes">Valid until the next line is asked for; copy what is to be kept.</param>
/// <param name="Ended">False: the stream ended before the line did.</param>
public readonly record struct NdjsonLine(long Number, ReadOnlySequence<byte> Bytes, RecordResult Result, bool Ended = true);

/// <summary>Cuts lines from a pipe and reads each. How the bytes were batched does not matter; memory is bounded by the longest line.</summary>
public static class NdjsonStream
{
    /// <summary>
    /// Every line that is not blank, in order, problems included: the caller decides whether to go on after one.
    /// A last line without its end is read like any other.
    /// </summary>
    public static async IAsyncEnumerable<NdjsonLine> ReadAsync(PipeReader pipe, RecordReader reader, NdjsonLimits? limits = null, [EnumeratorCancellation] CancellationToken cancel = default)
    {
        ArgumentNullException.ThrowIfNull(pipe);
        ArgumentNullException.ThrowIfNull(reader);
        var longest = (limits ?? NdjsonLimits.Default).LineBytes;
        long number = 0;
        long scanned = 0;
        var passingOver = false;
        while (true)
        {
            var read = await pipe.ReadAsync(cancel).ConfigureAwait(false);
            var buffer = read.Buffer;
            while (TryCutLine(ref buffer, ref scanned, read.IsCompleted, out var line, out var ended))
            {
                if (passingOver)
                {
                    passingOver = false;
                    continue;
                }
                number++;
                var result = line.Length > longest ? TooLong(number, longest) : reader.Read(line, number);
                if (!result.IsBlank) yield return new NdjsonLine(number, line, result, ended);
            }
            if (buffer.Length > longest)
            {
                if (!passingOver) yield return new NdjsonLine(++number, default, TooLong(number, longest));
                passingOver = true;
                buffer = buffer.Slice(buffer.End);
                scanned = 0;
            }
            pipe.AdvanceTo(buffer.Start, buffer.End);
            if (read.IsCompleted) yield break;
        }
    }

    /// <summary>Cuts the next line, without its LF, off the front of the buffer; false when there is no whole line.</summary>
    /// <param name="scanned">How much of the buffer is known to hold no line end, so that a long line is searched once only.</param>
    /// <param name="final">True: nothing follows, so a rest without a line end is a line.</param>
    private static bool TryCutLine(ref ReadOnlySequence<byte> buffer, ref long scanned, bool final, out ReadOnlySequence<byte> line, out bool ended)
    {
        line = buffer;
        ended = true;
        if (buffer.Slice(scanned).PositionOf((byte)'\n') is { } end)
        {
            line = buffer.Slice(0, end);
            buffer = buffer.Slice(buffer.GetPosition(1, end));
            scanned = 0;
            return true;
        }
        scanned = buffer.Length;
        ended = false;
        if (!final || buffer.IsEmpty) return false;
        buffer = buffer.Slice(buffer.End);
        scanned = 0;
        return true;
    }

    private static RecordResult TooLong(long number, int longest) =>
        new(null, new RecordProblem(number, null, $"a line of at most {longest} bytes", "a longer one", ProblemCodes.TooLong));
}
