using System.Buffers;
using System.IO.Pipelines;
using System.Text;
using CouplingWatch.Ndjson;
using CouplingWatch.Testing.Shapes;
using CsCheck;

namespace CouplingWatch.StreamTests.Ndjson;

public sealed class RecordRoundTripTests
{
    [Fact]
    public void What_was_written_reads_back_as_the_same_record()
    {
        RecordGen.Any.Sample(record =>
        {
            var line = RecordWriter.Line(record);
            Assert.Equal(line.Length - 1, line.AsSpan().IndexOf((byte)'\n'));
            var result = new RecordReader().Read(line);
            Assert.Null(result.Problem?.Sentence);
            Assert.Null(Structure.FirstDifference(record, result.Record));
        }, iter: 3000, print: r => Encoding.UTF8.GetString(RecordWriter.Line(r)));
    }

    [Fact]
    public void A_mutilated_line_gives_a_record_or_a_problem_and_never_an_exception()
    {
        var mutilation = Gen.Select(Gen.Int[0, 1 << 20], Gen.Int[0, 4], Gen.OneOf(Gen.OneOf("{}[]\",:0-9eN\\u\0"u8.ToArray()), Gen.Byte));
        Gen.Select(RecordGen.Any, mutilation.Array[1, 6]).Sample((record, cuts) =>
        {
            var line = RecordWriter.Line(record).ToList();
            foreach (var (at, how, with) in cuts)
            {
                var place = at % line.Count;
                if (how == 0) line.RemoveAt(place);
                else if (how == 1) line.Insert(place, with);
                else if (how == 2) line[place] = with;
                else if (how == 3) line.RemoveRange(place, Math.Min(line.Count - place, 5));
                else line.InsertRange(place, line.GetRange(0, Math.Min(line.Count, 40)));
                if (line.Count == 0) line.Add(with);
            }
            var reader = new RecordReader { Shape = StreamShape.Of([]) };
            var result = reader.Read(line.ToArray(), 3);
            if (result.Problem is { } problem)
            {
                Assert.StartsWith("line 3", problem.Sentence, StringComparison.Ordinal);
                Assert.NotEmpty(problem.Expected);
            }
        }, iter: 20000);
    }

    [Fact]
    public Task How_the_bytes_were_batched_does_not_matter() =>
        Gen.Select(RecordGen.WithoutShape.Array[1, 12], Gen.Int[1, 400].Array[1, 30]).SampleAsync(async (records, cuts) =>
        {
            var text = records.SelectMany((r, i) => i % 3 == 1 ? [.. "\r\n"u8, .. RecordWriter.Line(r)] : RecordWriter.Line(r)).ToArray();
            var pipe = new Pipe(new PipeOptions(pauseWriterThreshold: 0));
            for (int at = 0, i = 0; at < text.Length; i++)
            {
                var length = Math.Min(cuts[i % cuts.Length], text.Length - at);
                pipe.Writer.Write(text.AsSpan(at, length));
                at += length;
                if (i % 4 == 0) await pipe.Writer.FlushAsync();
            }
            await pipe.Writer.CompleteAsync();
            var read = new List<byte[]>();
            await foreach (var line in NdjsonStream.ReadAsync(new ShortReads(pipe.Reader, cuts), new RecordReader()))
            {
                Assert.Null(line.Result.Problem?.Sentence);
                read.Add(RecordWriter.Line(line.Result.Record!));
                var received = line.Bytes.ToArray();
                Assert.True(read[^1].AsSpan(0, read[^1].Length - 1).SequenceEqual(received), "the bytes stand beside the record as received");
            }
            Assert.Equal(records.Select(RecordWriter.Line), read);
        }, iter: 200);

    /// <summary>Shows its bytes a few more at each read, so that lines arrive in pieces.</summary>
    private sealed class ShortReads(PipeReader inner, int[] cuts) : PipeReader
    {
        private int turn;
        private long shown;
        private ReadOnlySequence<byte> whole;

        public override async ValueTask<ReadResult> ReadAsync(CancellationToken cancellationToken = default)
        {
            var read = await inner.ReadAsync(cancellationToken);
            whole = read.Buffer;
            shown = Math.Min(whole.Length, shown + cuts[turn++ % cuts.Length]);
            return new ReadResult(whole.Slice(0, shown), false, read.IsCompleted && shown == whole.Length);
        }

        public override void AdvanceTo(SequencePosition consumed, SequencePosition examined)
        {
            shown -= whole.Slice(0, consumed).Length;
            inner.AdvanceTo(consumed, whole.GetPosition(shown, consumed));
            inner.CancelPendingRead();
        }

        public override void AdvanceTo(SequencePosition consumed) => AdvanceTo(consumed, consumed);

        public override bool TryRead(out ReadResult result) => throw new NotSupportedException();

        public override void CancelPendingRead() => inner.CancelPendingRead();

        public override void Complete(Exception? exception = null) => inner.Complete(exception);
    }
}
