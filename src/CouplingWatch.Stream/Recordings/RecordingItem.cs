using CouplingWatch.Ndjson;
using CouplingWatch.Records;

namespace CouplingWatch.Recordings;

/// <summary>What a recording says next: a record, a note on what was tolerated, or a problem; exactly one of the three.</summary>
/// <param name="Line">Number of the line, from 1.</param>
/// <param name="Received">The record's own time, or that of the record before it; the Unix epoch before the first time.</param>
public readonly record struct RecordingItem(long Line, DateTimeOffset Received, StreamRecord? Record, RecordingNote? Note, RecordProblem? Problem);

/// <summary>Something a crash or a resend left in a file, which was passed over.</summary>
public sealed record RecordingNote(RecordingNoteKind Kind, string Text);

public enum RecordingNoteKind
{
    /// <summary>The last line was only half written.</summary>
    TornTail,

    /// <summary>A block of NUL bytes, as a crash of the file system leaves it.</summary>
    NulBlock,

    /// <summary>A record sent a second time.</summary>
    Resent,

    /// <summary>Records are missing here.</summary>
    Gap,
}

/// <param name="Bytes">Read so far.</param>
/// <param name="TotalBytes">Of the file as it was when reading began.</param>
/// <param name="Lines">Lines read so far.</param>
public readonly record struct RecordingProgress(long Bytes, long TotalBytes, long Lines)
{
    /// <summary>0…1.</summary>
    public double Share => TotalBytes <= 0 ? 1 : Math.Min(1, (double)Bytes / TotalBytes);
}
