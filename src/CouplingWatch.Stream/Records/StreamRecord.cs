namespace CouplingWatch.Records;

/// <summary>One record of a residual stream. Every record but <see cref="BeatRecord"/> has a <see cref="Seq"/> from 0, growing by one.</summary>
public abstract record StreamRecord
{
    public abstract string Kind { get; }

    /// <summary>Place in the stream of the run, from 0 with <c>open</c>; −1 for a beat sent without one.</summary>
    public long Seq { get; init; } = -1;

    /// <summary>The sender's clock, if it was sent.</summary>
    public DateTimeOffset? At { get; init; }
}

/// <summary>The code's verdict on a time step.</summary>
public sealed record StepRecord : StreamRecord
{
    public override string Kind => "step";
    public required int Step { get; init; }
    public int? Attempt { get; init; }
    /// <summary>Number of passes of the step (last index + 1), if sent.</summary>
    public int? Iterations { get; init; }
    public double? TimeStep { get; init; }
    public required StepOutcome Outcome { get; init; }
}

public enum StepOutcome { Converged, Capped, Rejected, Failed }

/// <summary>A settings revision was taken over from <see cref="FromStep"/> on, or refused with a reason.</summary>
public sealed record AppliedRecord : StreamRecord
{
    public override string Kind => "applied";
    public required int Revision { get; init; }
    public int? FromStep { get; init; }
    public int? FromIteration { get; init; }
    /// <summary>The complete settings in force; null when refused.</summary>
    public CouplingSettings? Settings { get; init; }
    public string? Refused { get; init; }
}

/// <summary>A restart can begin from here.</summary>
public sealed record CheckpointRecord : StreamRecord
{
    public override string Kind => "checkpoint";
    public required int Step { get; init; }
    public double? Time { get; init; }
    public double? Seconds { get; init; }
}

/// <summary>Remeshing or repartitioning: earlier columns no longer compare.</summary>
public sealed record ResizeRecord : StreamRecord
{
    public override string Kind => "resize";
    public required IReadOnlyList<FieldDeclaration> Fields { get; init; }
    /// <summary>True when the code mapped its old columns to the new mesh, false when it cleared them.</summary>
    public bool BasisMapped { get; init; }
    public bool Reordered { get; init; }
}

/// <summary>The sender dropped records rather than stop its solver.</summary>
public sealed record SkippedRecord : StreamRecord
{
    public override string Kind => "skipped";
    public int? Iterations { get; init; }
    public string? Why { get; init; }
}

public sealed record RemarkRecord : StreamRecord
{
    public override string Kind => "remark";
    public string Text { get; init; } = "";
}

public sealed record CloseRecord : StreamRecord
{
    public override string Kind => "close";
    public required CloseOutcome Outcome { get; init; }
    public string? Reason { get; init; }
}

public enum CloseOutcome { Finished, Aborted, Diverged, Stopped }

/// <summary>A sign of life between records: alive, and inside which solver since when. Usually without seq; never journaled then.</summary>
public sealed record BeatRecord : StreamRecord
{
    public override string Kind => "beat";
    public string? In { get; init; }
    public double? InsideSeconds { get; init; }
}

/// <summary>A record of a kind this version does not know: kept, ignored and noted.</summary>
public sealed record UnknownRecord(string KindSent) : StreamRecord
{
    public override string Kind => KindSent;
}
