using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace CouplingWatch.Benchmarks.Secants;

/// <summary>
/// The floor: reading as many columns of the same length from memory, four side by side, and doing nothing but adding them
/// up; with every sweep the vector is read, with all but the first it is written. Nothing that must look at every entry of Q
/// that often can be faster than this. The columns begin on 64-byte boundaries, as those of the basis do.
/// </summary>
internal sealed class MemorySweep
{
    private readonly Memory<double>[] columns;
    private readonly Memory<double> vector;

    internal MemorySweep(int rows, int count)
    {
        columns = new Memory<double>[count];
        for (int j = 0; j < count; j++)
        {
            columns[j] = Aligned(rows);
            for (int i = 0; i < rows; i++) columns[j].Span[i] = i % 7;
        }
        vector = Aligned(rows);
    }

    internal double Sum { get; private set; }

    internal void Read(int times)
    {
        Vector512<double> total = default;
        for (int t = 0; t < times; t++)
        {
            int j = 0;
            for (; j + 4 <= columns.Length; j += 4) total += Four(columns[j].Span, columns[j + 1].Span, columns[j + 2].Span, columns[j + 3].Span);
            for (; j < columns.Length; j++) total += One(columns[j].Span);
            total += One(vector.Span);
            if (t > 0) vector.Span.Fill(t);
        }
        Sum += Vector512.Sum(total);
    }

    private static Memory<double> Aligned(int length)
    {
        double[] array = GC.AllocateArray<double>(length + 7, pinned: true);
        long past = Marshal.UnsafeAddrOfPinnedArrayElement(array, 0) % 64;
        return array.AsMemory((int)((64 - past) % 64 / sizeof(double)), length);
    }

    private static Vector512<double> Four(ReadOnlySpan<double> first, ReadOnlySpan<double> second, ReadOnlySpan<double> third, ReadOnlySpan<double> fourth)
    {
        ref double a = ref MemoryMarshal.GetReference(first);
        ref double b = ref MemoryMarshal.GetReference(second);
        ref double c = ref MemoryMarshal.GetReference(third);
        ref double d = ref MemoryMarshal.GetReference(fourth);
        Vector512<double> s0 = default, s1 = default, s2 = default, s3 = default;
        for (nuint i = 0; i + 8 <= (nuint)first.Length; i += 8)
        {
            s0 += Vector512.LoadUnsafe(ref a, i);
            s1 += Vector512.LoadUnsafe(ref b, i);
            s2 += Vector512.LoadUnsafe(ref c, i);
            s3 += Vector512.LoadUnsafe(ref d, i);
        }
        return s0 + s1 + s2 + s3;
    }

    private static Vector512<double> One(ReadOnlySpan<double> column)
    {
        ref double a = ref MemoryMarshal.GetReference(column);
        Vector512<double> s0 = default, s1 = default;
        for (nuint i = 0; i + 16 <= (nuint)column.Length; i += 16)
        {
            s0 += Vector512.LoadUnsafe(ref a, i);
            s1 += Vector512.LoadUnsafe(ref a, i + 8);
        }
        return s0 + s1;
    }
}
