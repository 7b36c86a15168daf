using System.Runtime.InteropServices;
using System.Security.Cryptography;
using System.Text;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;
using CouplingWatch.Sketching;
using static CouplingWatch.Server.Tests.RunLines;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Intake;

public class KeepingLongVectors
{
    private const int Length = VectorRetention.LongestVector + 1;

    [Fact]
    public async Task Vectors_longer_than_the_limit_are_kept_as_their_sketch_and_compared_as_they_were_sent()
    {
        await using var watch = await StartAsync();
        await watch.AcceptAsync("leaf-1", Open().Replace("\"size\":3", $"\"size\":{Length}"));
        var line = Iteration(1, 0, 0, more: $",\"vectors\":{{\"residual\":\"{Vector(1)}\",\"output\":\"{Vector(2)}\"}}");
        await watch.AcceptAsync("leaf-1", line);

        var kept = await watch.Journal.FindAsync("leaf-1", 1, TestContext.Current.CancellationToken);
        Assert.Equal(SHA256.HashData(Encoding.UTF8.GetBytes(line.TrimEnd('\n'))), kept!.Digest.ToArray());
        var record = Assert.IsType<IterationRecord>(new RecordReader().Read(kept.Body.Span).Record);
        Assert.Null(record.Vectors);
        Assert.Equal(VectorRetention.KeptRows, record.Sketch!.Rows);
        Assert.Equal(0.01, record.Residuals.Values[0]);

        Assert.Equal(2, await watch.AcceptAsync("leaf-1", line));
        var other = Iteration(1, 0, 0, more: $",\"vectors\":{{\"residual\":\"{Vector(3)}\",\"output\":\"{Vector(2)}\"}}");
        await FaultAsync(await watch.PostAsync("leaf-1", other), 409, "seq-conflict");
    }

    private static string Vector(double first)
    {
        var values = new double[Length];
        values[0] = first;
        return Convert.ToBase64String(MemoryMarshal.AsBytes<double>(values));
    }
}
