using System.Buffers;
using System.Text.Json;
using CouplingWatch.Ndjson.Parsing;
using CouplingWatch.Records;

namespace CouplingWatch.Ndjson;

/// <summary>
/// Reads one line of a residual stream into a record. Never throws on bad input: what is wrong is a <see cref="RecordProblem"/>.
/// A byte order mark, a closing CR and LF are taken away, a blank line is neither record nor problem. Names are interned per reader,
/// vectors decoded straight into their arrays. Cost: one pass over the line; a second where bare NaN or Infinity tokens must be
/// replaced first. Not safe for concurrent use.
/// </summary>
/// <param name="names">The names of the stream, to share them with an earlier reader of it.</param>
public sealed class RecordReader(NameTable? names = null)
{
    private readonly ParseScratch scratch = new(names ?? new NameTable());
    private ArrayBufferWriter<byte>? patched;
    private bool sloppy;

    /// <summary>Vector lengths known so far; set by <c>open</c>, <c>resize</c> and first vectors as they are read. Null: lengths are not held against declarations.</summary>
    public StreamShape? Shape { get; set; }

    public NameTable Names => scratch.Names;

    /// <param name="line">One line, with or without its end.</param>
    /// <param name="lineNumber">Stands in the problem; 0 when the line has no number.</param>
    public RecordResult Read(in ReadOnlySequence<byte> line, long lineNumber = 0)
    {
        if (line.IsSingleSegment) return Read(line.FirstSpan, lineNumber);
        var length = (int)line.Length;
        var joined = ArrayPool<byte>.Shared.Rent(length);
        try
        {
            line.CopyTo(joined);
            return Read(joined.AsSpan(0, length), lineNumber);
        }
        finally
        {
            ArrayPool<byte>.Shared.Return(joined);
        }
    }

    /// <inheritdoc cref="Read(in ReadOnlySequence{byte}, long)"/>
    public RecordResult Read(ReadOnlySpan<byte> line, long lineNumber = 0)
    {
        line = Trim(line);
        if (line.IsEmpty) return default;
        RecordResult result;
        if (sloppy)
        {
            result = ReadStrict(TryPatch(line) ? patched!.WrittenSpan : line, lineNumber);
        }
        else
        {
            result = ReadStrict(line, lineNumber);
            if (result.Problem?.Code == ProblemCodes.Malformed && TryPatch(line))
            {
                var second = ReadStrict(patched!.WrittenSpan, lineNumber);
                sloppy = second.Record is not null;
                if (second.Problem?.Code != ProblemCodes.Malformed) result = second;
            }
        }
        if (result.Record is { } record && (Shape is not null || record is OpenRecord or ResizeRecord)) Shape = (Shape ?? EmptyShape).After(record);
        return result;
    }

    private static readonly StreamShape EmptyShape = StreamShape.Of([]);

    private bool TryPatch(ReadOnlySpan<byte> line)
    {
        patched ??= new ArrayBufferWriter<byte>(line.Length + 64);
        patched.ResetWrittenCount();
        return SloppyTokens.TryPatch(line, patched);
    }

    private RecordResult ReadStrict(ReadOnlySpan<byte> line, long lineNumber)
    {
        var cursor = new RecordCursor(line, lineNumber, scratch);
        try
        {
            cursor.Json.Read();
            var record = Dispatch(ref cursor);
            if (record is not null) cursor.Json.Read();
            return cursor.Problem is { } problem ? new RecordResult(null, problem) : new RecordResult(record, null);
        }
        catch (JsonException thrown)
        {
            var at = $"something else at byte {thrown.BytePositionInLine}";
            return new RecordResult(null, new RecordProblem(lineNumber, cursor.MemberPath(), "one JSON object a line", at, ProblemCodes.Malformed));
        }
        catch (Exception thrown) when (thrown is InvalidOperationException or FormatException)
        {
            return new RecordResult(null, new RecordProblem(lineNumber, cursor.MemberPath(), "valid UTF-8 text", "bytes or escapes that are no text", ProblemCodes.Malformed));
        }
    }

    private StreamRecord? Dispatch(ref RecordCursor c)
    {
        if (!FindKind(ref c, out var kind)) return null;
        return kind switch
        {
            "iteration" => IterationParser.Read(ref c, Shape),
            "open" => OpenParser.Read(ref c),
            "step" or "applied" or "checkpoint" or "resize" or "skipped" or "remark" or "close" or "beat" => SmallRecords.Read(ref c, kind),
            _ => SmallRecords.ReadUnknown(ref c, kind),
        };
    }

    /// <summary>Looks ahead for the kind, usually the first member.</summary>
    private static bool FindKind(ref RecordCursor c, out string kind)
    {
        kind = "";
        var ahead = c;
        var good = ahead.EnterObject("one JSON object a line");
        while (good && ahead.NextMember())
        {
            if (ahead.Is("kind"u8, "kind")) return ahead.Name(out kind) || c.Adopt(ahead);
            good = ahead.SkipMember();
        }
        if (good) ahead.FailMissing("kind", "the kind of the record");
        return c.Adopt(ahead);
    }

    private static ReadOnlySpan<byte> Trim(ReadOnlySpan<byte> line)
    {
        if (line.StartsWith("\uFEFF"u8)) line = line[3..];
        return line.Trim(" \t\r\n"u8);
    }
}
