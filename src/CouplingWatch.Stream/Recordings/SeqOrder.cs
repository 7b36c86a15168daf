using System.Buffers;
using System.Runtime.InteropServices;

namespace CouplingWatch.Recordings;

/// <summary>Follows the seq of a recording: next, sent again, in conflict with an earlier one, or after a gap. Remembers the content of the latest 1,024 records.</summary>
internal sealed class SeqOrder
{
    private const int Remembered = 1024;

    private readonly ulong[] prints = new ulong[Remembered];

    /// <summary>The seq expected next.</summary>
    public long Next { get; private set; }

    public SeqPlace Take(long seq, in ReadOnlySequence<byte> bytes)
    {
        if (seq < 0) return SeqPlace.Next;
        var print = Fingerprint(bytes);
        if (seq < Next) return Next - seq > Remembered || prints[seq % Remembered] == print ? SeqPlace.Resent : SeqPlace.Conflict;
        var place = seq == Next ? SeqPlace.Next : SeqPlace.Gap;
        prints[seq % Remembered] = print;
        Next = seq + 1;
        return place;
    }

    /// <summary>64 bits of the content, to tell a resend from a conflict; no defence against an adversary.</summary>
    private static ulong Fingerprint(in ReadOnlySequence<byte> bytes)
    {
        const ulong prime = 0x9E3779B97F4A7C15;
        ulong hash = prime ^ (ulong)bytes.Length;
        ulong rest = 0;
        var filled = 0;
        foreach (var segment in bytes)
        {
            var span = segment.Span;
            while (filled > 0 && !span.IsEmpty) Push(ref hash, ref rest, ref filled, ref span);
            foreach (var word in MemoryMarshal.Cast<byte, ulong>(span)) hash = Mix(hash, word);
            span = span[(span.Length & ~7)..];
            while (!span.IsEmpty) Push(ref hash, ref rest, ref filled, ref span);
        }
        return Mix(hash, rest);

        static ulong Mix(ulong hash, ulong word) => (((hash ^ word) * prime) << 29) | (((hash ^ word) * prime) >> 35);

        static void Push(ref ulong hash, ref ulong rest, ref int filled, ref ReadOnlySpan<byte> span)
        {
            rest |= (ulong)span[0] << (8 * filled++);
            span = span[1..];
            if (filled < 8) return;
            hash = Mix(hash, rest);
            (rest, filled) = (0, 0);
        }
    }
}

internal enum SeqPlace { Next, Resent, Conflict, Gap }
