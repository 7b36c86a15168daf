using System.Net;
using System.Net.Http.Headers;
using CouplingWatch.Client.Buffering;

namespace CouplingWatch.Client.Delivery;

/// <summary>Records as the body of a post, written line by line without gluing them together first.</summary>
internal sealed class LinesContent : HttpContent
{
    private readonly IReadOnlyList<Pending> batch;
    private readonly byte[]? beat;

    public LinesContent(IReadOnlyList<Pending> batch, byte[]? beat)
    {
        this.batch = batch;
        this.beat = beat;
        Headers.ContentType = new MediaTypeHeaderValue("application/x-ndjson");
    }

    protected override async Task SerializeToStreamAsync(Stream stream, TransportContext? context)
    {
        foreach (var entry in batch) await stream.WriteAsync(entry.Line).ConfigureAwait(false);
        if (beat is not null) await stream.WriteAsync(beat).ConfigureAwait(false);
    }

    protected override bool TryComputeLength(out long length)
    {
        length = batch.Sum(e => (long)e.Line.Length) + (beat?.Length ?? 0);
        return true;
    }
}
