using CouplingWatch.Records;
using CouplingWatch.Server.Problems;

namespace CouplingWatch.Server.Runs;

/// <summary>One record of a post, understood and not yet accepted.</summary>
/// <param name="Record">As it is kept and judged: long vectors sketched.</param>
/// <param name="Body">The JSON of <paramref name="Record"/>.</param>
/// <param name="Digest">SHA-256 of the line as received, without its end.</param>
/// <param name="Line">Line in the post, from 1.</param>
internal sealed record IncomingRecord(StreamRecord Record, ReadOnlyMemory<byte> Body, byte[] Digest, int Line);

/// <summary>What became of a batch: everything before the fault is durable and judged.</summary>
/// <param name="Next">Seq expected next.</param>
/// <param name="Revision">Newest settings revision.</param>
internal readonly record struct IntakeAnswer(long Next, int Revision, IntakeFault? Fault = null);

/// <param name="Line">Line in the post, from 1; null when the fault is not of one record.</param>
/// <param name="Member">The member concerned, as a path.</param>
/// <param name="RetryAfterSeconds">When sending again makes sense.</param>
internal sealed record IntakeFault(Problem Problem, string Detail, int? Line = null, long? Seq = null, string? Member = null, string? Expected = null, int? RetryAfterSeconds = null)
{
    /// <summary>The finer code of a malformed record; null otherwise.</summary>
    public string? Code { get; init; }
}
