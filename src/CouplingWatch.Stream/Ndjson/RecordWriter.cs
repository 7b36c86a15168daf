using System.Buffers;
using System.Text.Encodings.Web;
using System.Text.Json;
using CouplingWatch.Ndjson.Parsing;
using CouplingWatch.Ndjson.Writing;
using CouplingWatch.Records;

namespace CouplingWatch.Ndjson;

/// <summary>
/// Writes records as NDJSON, one line with its LF each. Numbers are written with the fewest digits that read back exactly, members that
/// were not sent are left out. What <see cref="RecordReader"/> reads back is the same record, bit for bit. Not safe for concurrent use.
/// </summary>
public sealed class RecordWriter : IDisposable
{
    // Lines are no HTML: letters stay as they are, so that a person can read them.
    private readonly Utf8JsonWriter json = new(Stream.Null, new JsonWriterOptions { Encoder = JavaScriptEncoder.UnsafeRelaxedJsonEscaping, SkipValidation = true });

    public void Write(StreamRecord record, IBufferWriter<byte> target)
    {
        ArgumentNullException.ThrowIfNull(record);
        ArgumentNullException.ThrowIfNull(target);
        json.Reset(target);
        json.WriteStartObject();
        json.WriteString("kind"u8, record.Kind);
        if (record.Seq >= 0) json.WriteNumber("seq"u8, record.Seq);
        if (record.At is { } at) json.WriteString("at"u8, at);
        Body(record);
        json.WriteEndObject();
        json.Flush();
        target.Write("\n"u8);
    }

    /// <summary>The record as one line with its LF.</summary>
    public static byte[] Line(StreamRecord record)
    {
        using var writer = new RecordWriter();
        var buffer = new ArrayBufferWriter<byte>();
        writer.Write(record, buffer);
        return buffer.WrittenSpan.ToArray();
    }

    public void Dispose() => json.Dispose();

    private void Body(StreamRecord record)
    {
        switch (record)
        {
            case IterationRecord iteration:
                IterationWriter.Write(json, iteration);
                break;
            case OpenRecord open:
                OpenWriter.Write(json, open);
                break;
            case StepRecord step:
                json.WriteNumber("step"u8, step.Step);
                json.Maybe("attempt"u8, step.Attempt);
                json.Maybe("iterations"u8, step.Iterations);
                json.Maybe("timeStep"u8, step.TimeStep);
                json.WriteString("outcome"u8, EnumWords<StepOutcome>.Word(step.Outcome));
                break;
            case AppliedRecord applied:
                json.WriteNumber("revision"u8, applied.Revision);
                json.Maybe("fromStep"u8, applied.FromStep);
                json.Maybe("fromIteration"u8, applied.FromIteration);
                if (applied.Settings is { } settings) OpenWriter.Settings(json, settings);
                json.Maybe("refused"u8, applied.Refused);
                break;
            case CheckpointRecord checkpoint:
                json.WriteNumber("step"u8, checkpoint.Step);
                json.Maybe("time"u8, checkpoint.Time);
                json.Maybe("seconds"u8, checkpoint.Seconds);
                break;
            case ResizeRecord resize:
                OpenWriter.Fields(json, resize.Fields);
                json.WriteString("basis"u8, resize.BasisMapped ? "mapped"u8 : "cleared"u8);
                json.WriteBoolean("reordered"u8, resize.Reordered);
                break;
            case SkippedRecord skipped:
                json.Maybe("iterations"u8, skipped.Iterations);
                json.Maybe("why"u8, skipped.Why);
                break;
            case RemarkRecord remark:
                json.WriteString("text"u8, remark.Text);
                break;
            case CloseRecord close:
                json.WriteString("outcome"u8, EnumWords<CloseOutcome>.Word(close.Outcome));
                json.Maybe("reason"u8, close.Reason);
                break;
            case BeatRecord beat:
                json.Maybe("in"u8, beat.In);
                json.Maybe("insideSeconds"u8, beat.InsideSeconds);
                break;
            default:
                break;
        }
    }
}
