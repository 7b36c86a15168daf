using System.Text;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;
using CouplingWatch.Sketching;
using CouplingWatch.Testing.Shapes;

namespace CouplingWatch.StreamTests.Sketching;

public sealed class VectorRetentionTests
{
    private static IterationRecord Iteration(int length) => new()
    {
        Seq = 4,
        Step = 0,
        Iteration = 2,
        Residuals = NamedValues.Of(("a", 3)),
        Vectors = new VectorPair([.. Enumerable.Range(0, length).Select(i => Math.Sin(i))], [.. Enumerable.Range(0, length).Select(i => Math.Cos(i))]),
    };

    [Fact]
    public void Vectors_up_to_the_limit_are_kept_as_they_are_and_longer_ones_as_a_marked_sketch()
    {
        var most = Iteration(VectorRetention.LongestVector);
        Assert.Same(most, VectorRetention.Keep(most));
        var longer = Iteration(VectorRetention.LongestVector + 1);
        var kept = Assert.IsType<IterationRecord>(VectorRetention.Keep(longer));
        Assert.Null(kept.Vectors);
        Assert.Equal((1024, VectorRetention.KeptSeed, 16385), (kept.Sketch!.Rows, kept.Sketch.Seed, kept.Sketch.FullRows));
        Assert.Equal(new SparseSignSketch(1024, VectorRetention.KeptSeed).Apply(longer.Vectors!.Output), kept.Sketch.Output);
        Assert.Same(longer.Residuals, kept.Residuals);
    }

    [Fact]
    public void A_long_group_is_sketched_and_a_short_one_beside_it_is_not()
    {
        var groups = new Dictionary<string, GroupData> { ["gate"] = new(Iteration(20000).Vectors, null, null), ["valve"] = new(Iteration(30).Vectors, null, null) };
        var kept = Assert.IsType<IterationRecord>(VectorRetention.Keep(Iteration(1) with { Vectors = null, Groups = groups }));
        Assert.Equal(20000, kept.Groups!["gate"].Sketch!.FullRows);
        Assert.Same(groups["valve"], kept.Groups["valve"]);
    }

    [Fact]
    public void The_kept_body_reads_as_the_kept_record_and_keeps_what_it_does_not_know()
    {
        var sent = Iteration(20000);
        var text = Encoding.UTF8.GetString(RecordWriter.Line(sent)).TrimEnd()[..^1] + ",\"ünit\":{\"a\":1e400}}";
        var received = Encoding.UTF8.GetBytes(text);
        var kept = VectorRetention.Keep(sent);
        var body = VectorRetention.KeepBody(sent, kept, received);
        Assert.True(body.Length < 30000, $"{body.Length} bytes");
        Assert.Contains("\"a\":1e400", Encoding.UTF8.GetString(body.Span), StringComparison.Ordinal);
        Assert.Null(Structure.FirstDifference(kept, new RecordReader().Read(body.Span).Record));
        var sloppy = Encoding.UTF8.GetBytes(text.Replace("\"ünit\":{\"a\":1e400}", "\"time\":NaN", StringComparison.Ordinal));
        Assert.Null(Structure.FirstDifference(kept, new RecordReader().Read(VectorRetention.KeepBody(sent, kept, sloppy).Span).Record));
        var small = Iteration(3);
        Assert.True(VectorRetention.KeepBody(small, small, received).Equals(received.AsMemory()), "bytes received are kept as they are");
    }

    [Fact]
    public void A_kept_sketch_fixes_the_length_of_the_vectors_it_stands_for()
    {
        var shape = StreamShape.Of([new FieldDeclaration { Name = "a" }]).After(VectorRetention.Keep(Iteration(20000)));
        Assert.Equal(20000, shape.VectorLength());
        var reader = new RecordReader { Shape = shape };
        Assert.NotNull(reader.Read(RecordWriter.Line(Iteration(20000))).Record);
        Assert.Equal(ProblemCodes.WrongLength, reader.Read(RecordWriter.Line(Iteration(19999))).Problem?.Code);
    }
}
