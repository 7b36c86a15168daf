using System.Buffers;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;

namespace CouplingWatch.Testing.Streams;

/// <summary>Records as the bytes of an NDJSON file, made as they are read: a recording of any length that never exists as a whole.</summary>
public sealed class RecordsAsBytes(IEnumerable<StreamRecord> records) : Stream
{
    private readonly IEnumerator<StreamRecord> next = records.GetEnumerator();
    private readonly RecordWriter writer = new();
    private readonly ArrayBufferWriter<byte> made = new(64 * 1024);
    private int taken;

    public override bool CanRead => true;

    public override bool CanSeek => false;

    public override bool CanWrite => false;

    public override long Length => throw new NotSupportedException();

    public override long Position { get => throw new NotSupportedException(); set => throw new NotSupportedException(); }

    public override int Read(Span<byte> buffer)
    {
        if (taken == made.WrittenCount)
        {
            made.ResetWrittenCount();
            taken = 0;
            while (made.WrittenCount < 32 * 1024 && next.MoveNext()) writer.Write(next.Current, made);
        }
        var count = Math.Min(buffer.Length, made.WrittenCount - taken);
        made.WrittenSpan.Slice(taken, count).CopyTo(buffer);
        taken += count;
        return count;
    }

    public override ValueTask<int> ReadAsync(Memory<byte> buffer, CancellationToken cancellationToken = default) => ValueTask.FromResult(Read(buffer.Span));

    public override int Read(byte[] buffer, int offset, int count) => Read(buffer.AsSpan(offset, count));

    public override void Flush() { }

    public override long Seek(long offset, SeekOrigin origin) => throw new NotSupportedException();

    public override void SetLength(long value) => throw new NotSupportedException();

    public override void Write(byte[] buffer, int offset, int count) => throw new NotSupportedException();

    protected override void Dispose(bool disposing)
    {
        if (disposing)
        {
            next.Dispose();
            writer.Dispose();
        }
        base.Dispose(disposing);
    }
}
