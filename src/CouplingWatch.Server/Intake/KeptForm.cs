using CouplingWatch.Records;
using CouplingWatch.Server.Runs;
using CouplingWatch.Sketching;

namespace CouplingWatch.Server.Intake;

/// <summary>The form in which a record is kept and judged: long vectors as their sketch. The digest stays that of the line received.</summary>
internal static class KeptForm
{
    public static IncomingRecord Of(StreamRecord record, ReadOnlyMemory<byte> body, byte[] digest, int line)
    {
        var kept = VectorRetention.Keep(record);
        return new IncomingRecord(kept, VectorRetention.KeepBody(record, kept, body), digest, line);
    }
}
