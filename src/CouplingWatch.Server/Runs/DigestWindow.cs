namespace CouplingWatch.Server.Runs;

/// <summary>SHA-256 digests of the latest records of a run, so that a resend is compared without reading the journal. 256 KiB when full.</summary>
internal sealed class DigestWindow
{
    private const int Kept = 8192;
    private byte[] digests = new byte[64 * 32];
    private long first;
    private long next;

    public void Add(long seq, ReadOnlySpan<byte> digest)
    {
        if (seq != next)
        {
            first = seq;
            next = seq;
        }
        var capacity = digests.Length / 32;
        if (next - first == capacity && capacity < Kept) Grow();
        capacity = digests.Length / 32;
        digest[..32].CopyTo(digests.AsSpan((int)(seq % capacity) * 32));
        next = seq + 1;
        first = Math.Max(first, next - capacity);
    }

    /// <summary>True when this seq is remembered; <paramref name="same"/> then says whether its digest is this one.</summary>
    public bool Knows(long seq, ReadOnlySpan<byte> digest, out bool same)
    {
        same = false;
        if (seq < first || seq >= next) return false;
        same = digests.AsSpan((int)(seq % (digests.Length / 32)) * 32, 32).SequenceEqual(digest);
        return true;
    }

    private void Grow()
    {
        var capacity = digests.Length / 32;
        var larger = new byte[digests.Length * 2];
        for (var seq = first; seq < next; seq++)
            digests.AsSpan((int)(seq % capacity) * 32, 32).CopyTo(larger.AsSpan((int)(seq % (capacity * 2)) * 32));
        digests = larger;
    }
}
