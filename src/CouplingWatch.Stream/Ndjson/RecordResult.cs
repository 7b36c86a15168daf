using CouplingWatch.Records;

namespace CouplingWatch.Ndjson;

/// <summary>What one line is: a record, a problem, or blank (neither).</summary>
public readonly record struct RecordResult(StreamRecord? Record, RecordProblem? Problem)
{
    public bool IsBlank => Record is null && Problem is null;
}
