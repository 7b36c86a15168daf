using CouplingWatch.Records;
using CouplingWatch.Server.Runs;
using CouplingWatch.Sketching;

namespace CouplingWatch.Server.Intake;

/// <summary>The form in which a record is kept and judged: long vectors as a sketch. Its digest stays that of the record as received.</summary>
internal static class KeptForm
{
    public static IncomingRecord Of(StreamRecord record, ReadOnlyMemory<byte> body, byte[] digest, int line)
    {
        var kept = VectorRetention.Keep(record);
        return new(kept, VectorRetention.KeepBody(record, kept, body), digest, line);
    }
}
