using System.Runtime.CompilerServices;
using System.Runtime.Intrinsics.X86;

namespace CouplingWatch.Numerics.Vectors;

/// <summary>Hints to the memory system. They change no result, and do nothing where the processor has none.</summary>
internal static unsafe class Cache
{
    /// <summary>Asks for the 64 doubles that lie 64 doubles behind <paramref name="here"/>; may reach past the end of a vector.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    internal static void FetchNextBlock(ref double here)
    {
        if (!Sse.IsSupported) return;
        byte* next = (byte*)Unsafe.AsPointer(ref here) + (64 * sizeof(double));
        Sse.Prefetch0(next);
        Sse.Prefetch0(next + 64);
        Sse.Prefetch0(next + 128);
        Sse.Prefetch0(next + 192);
        Sse.Prefetch0(next + 256);
        Sse.Prefetch0(next + 320);
        Sse.Prefetch0(next + 384);
        Sse.Prefetch0(next + 448);
    }
}
