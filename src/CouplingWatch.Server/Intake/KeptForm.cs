using CouplingWatch.Records;
using CouplingWatch.Server.Runs;

namespace CouplingWatch.Server.Intake;

/// <summary>The form in which a record is kept and judged.</summary>
internal static class KeptForm
{
    public static IncomingRecord Of(StreamRecord record, ReadOnlyMemory<byte> body, byte[] digest, int line) => new(record, body, digest, line);
}
