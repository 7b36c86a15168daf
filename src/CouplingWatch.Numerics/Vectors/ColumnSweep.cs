using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace CouplingWatch.Numerics.Vectors;

/// <summary>
/// Sweeps over the columns of a tall matrix Q that is held column by column. Sixty-four rows of the vector stay in registers
/// while all columns pass by; the 64 rows of Q then lie in the first-level cache, so that subtracting Q·c and forming Qᵀv of
/// what remains reads Q from memory once. Eight running sums a column keep the rounding error small.
/// </summary>
internal static class ColumnSweep
{
    private const int Rows = 64;
    private const int Stretch = 8192;

    /// <summary>
    /// c = Qᵀv for the first <paramref name="count"/> columns. Reads Q once. As nothing is written, long stretches of four columns
    /// at a time are read instead of rows across all columns: that is the order memory likes best.
    /// </summary>
    internal static void Dots(AlignedVector[] q, int count, ReadOnlySpan<double> v, Span<double> c)
    {
        c[..count].Clear();
        for (int start = 0; start < v.Length; start += Stretch)
        {
            ReadOnlySpan<double> part = v.Slice(start, Math.Min(Stretch, v.Length - start));
            int j = 0;
            for (; j + 4 <= count; j += 4) FourDots(q, j, start, part, c.Slice(j, 4));
            for (; j < count; j++) c[j] += LongVector.Dot(q[j].Slice(start, part.Length), part);
        }
    }

    /// <summary>v ← v − Q·c, then d = Qᵀv; returns ‖v‖² of what remains. Reads Q once.</summary>
    internal static double SubtractThenDots(AlignedVector[] q, int count, Span<double> v, ReadOnlySpan<double> c, Span<double> d, SweepSums sums)
    {
        Span<Vector512<double>> s = sums.Cleared(count);
        ref double x = ref MemoryMarshal.GetReference(v);
        Vector512<double> squares = default;
        int start = 0;
        for (; start <= v.Length - Rows; start += Rows)
        {
            var rows = new RowBlock(ref x, start);
            rows.Subtract(q, c[..count], start);
            rows.Store(ref x, start);
            squares += rows.Squares();
            rows.AddDots(q, s, start);
        }
        Gather(s, d);
        TailSubtract(q, count, start, v, c);
        TailDots(q, count, start, v, d);
        return Vector512.Sum(squares) + LongVector.Dot(v[start..], v[start..]);
    }

    /// <summary>v ← factor·(v − Q·c). Reads Q once.</summary>
    internal static void SubtractAndScale(AlignedVector[] q, int count, Span<double> v, ReadOnlySpan<double> c, double factor)
    {
        ref double x = ref MemoryMarshal.GetReference(v);
        int start = 0;
        for (; start <= v.Length - Rows; start += Rows)
        {
            var rows = new RowBlock(ref x, start);
            rows.Subtract(q, c[..count], start);
            rows.Scale(factor);
            rows.Store(ref x, start);
        }
        TailSubtract(q, count, start, v, c);
        Scale(v[start..], factor);
    }

    /// <summary>Copies a vector and returns the sum of its squares, in one read.</summary>
    internal static double CopyAndSquare(ReadOnlySpan<double> source, Span<double> target)
    {
        ref double x = ref MemoryMarshal.GetReference(source);
        ref double y = ref MemoryMarshal.GetReference(target);
        Vector512<double> s0 = default, s1 = default;
        int i = 0;
        for (; i <= source.Length - 16; i += 16)
        {
            Vector512<double> a = Vector512.LoadUnsafe(ref x, (nuint)i), b = Vector512.LoadUnsafe(ref x, (nuint)i + 8);
            a.StoreUnsafe(ref y, (nuint)i);
            b.StoreUnsafe(ref y, (nuint)i + 8);
            s0 = Vector512.FusedMultiplyAdd(a, a, s0);
            s1 = Vector512.FusedMultiplyAdd(b, b, s1);
        }
        double sum = Vector512.Sum(s0 + s1);
        for (; i < source.Length; i++)
        {
            target[i] = source[i];
            sum = Math.FusedMultiplyAdd(source[i], source[i], sum);
        }
        return sum;
    }

    /// <summary>v ← factor·v.</summary>
    internal static void Scale(Span<double> v, double factor)
    {
        ref double x = ref MemoryMarshal.GetReference(v);
        Vector512<double> f = Vector512.Create(factor);
        int i = 0;
        for (; i <= v.Length - 8; i += 8) (Vector512.LoadUnsafe(ref x, (nuint)i) * f).StoreUnsafe(ref x, (nuint)i);
        for (; i < v.Length; i++) v[i] *= factor;
    }

    private static void FourDots(AlignedVector[] q, int first, int start, ReadOnlySpan<double> v, Span<double> c)
    {
        ref double x = ref MemoryMarshal.GetReference(v);
        ref double p0 = ref Unsafe.Add(ref q[first].Start, start), p1 = ref Unsafe.Add(ref q[first + 1].Start, start);
        ref double p2 = ref Unsafe.Add(ref q[first + 2].Start, start), p3 = ref Unsafe.Add(ref q[first + 3].Start, start);
        Vector512<double> s0 = default, s1 = default, s2 = default, s3 = default, t0 = default, t1 = default, t2 = default, t3 = default;
        int i = 0;
        for (; i <= v.Length - 16; i += 16)
        {
            nuint a = (nuint)i, b = a + 8;
            Vector512<double> even = Vector512.LoadUnsafe(ref x, a), odd = Vector512.LoadUnsafe(ref x, b);
            s0 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p0, a), even, s0);
            s1 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p1, a), even, s1);
            s2 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p2, a), even, s2);
            s3 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p3, a), even, s3);
            t0 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p0, b), odd, t0);
            t1 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p1, b), odd, t1);
            t2 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p2, b), odd, t2);
            t3 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p3, b), odd, t3);
        }
        c[0] += Vector512.Sum(s0 + t0);
        c[1] += Vector512.Sum(s1 + t1);
        c[2] += Vector512.Sum(s2 + t2);
        c[3] += Vector512.Sum(s3 + t3);
        for (; i < v.Length; i++)
            for (int k = 0; k < 4; k++) c[k] = Math.FusedMultiplyAdd(q[first + k].Span[start + i], v[i], c[k]);
    }

    private static void Gather(ReadOnlySpan<Vector512<double>> sums, Span<double> c)
    {
        for (int j = 0; j < sums.Length; j++) c[j] = Vector512.Sum(sums[j]);
    }

    private static void TailDots(AlignedVector[] q, int count, int start, ReadOnlySpan<double> v, Span<double> c)
    {
        if (start == v.Length) return;
        ReadOnlySpan<double> tail = v[start..];
        for (int j = 0; j < count; j++) c[j] += LongVector.Dot(q[j].Slice(start, tail.Length), tail);
    }

    private static void TailSubtract(AlignedVector[] q, int count, int start, Span<double> v, ReadOnlySpan<double> c)
    {
        if (start == v.Length) return;
        Span<double> tail = v[start..];
        for (int j = 0; j < count; j++) LongVector.AddScaled(tail, -c[j], q[j].Slice(start, tail.Length));
    }

    /// <summary>Sixty-four entries of the vector, in registers.</summary>
    private ref struct RowBlock
    {
        private Vector512<double> v0, v1, v2, v3, v4, v5, v6, v7;

        [MethodImpl(MethodImplOptions.AggressiveInlining)]
        internal RowBlock(ref double x, int start)
        {
            ref double p = ref Unsafe.Add(ref x, start);
            v0 = Vector512.LoadUnsafe(ref p);
            v1 = Vector512.LoadUnsafe(ref p, 8);
            v2 = Vector512.LoadUnsafe(ref p, 16);
            v3 = Vector512.LoadUnsafe(ref p, 24);
            v4 = Vector512.LoadUnsafe(ref p, 32);
            v5 = Vector512.LoadUnsafe(ref p, 40);
            v6 = Vector512.LoadUnsafe(ref p, 48);
            v7 = Vector512.LoadUnsafe(ref p, 56);
        }

        [MethodImpl(MethodImplOptions.AggressiveInlining)]
        internal readonly void Store(ref double x, int start)
        {
            ref double p = ref Unsafe.Add(ref x, start);
            v0.StoreUnsafe(ref p);
            v1.StoreUnsafe(ref p, 8);
            v2.StoreUnsafe(ref p, 16);
            v3.StoreUnsafe(ref p, 24);
            v4.StoreUnsafe(ref p, 32);
            v5.StoreUnsafe(ref p, 40);
            v6.StoreUnsafe(ref p, 48);
            v7.StoreUnsafe(ref p, 56);
        }

        [MethodImpl(MethodImplOptions.AggressiveInlining)]
        internal void Scale(double factor)
        {
            Vector512<double> f = Vector512.Create(factor);
            v0 *= f;
            v1 *= f;
            v2 *= f;
            v3 *= f;
            v4 *= f;
            v5 *= f;
            v6 *= f;
            v7 *= f;
        }

        [MethodImpl(MethodImplOptions.AggressiveInlining)]
        internal readonly Vector512<double> Squares() =>
            Vector512.FusedMultiplyAdd(v0, v0, Vector512.FusedMultiplyAdd(v1, v1, Vector512.FusedMultiplyAdd(v2, v2, v3 * v3)))
            + Vector512.FusedMultiplyAdd(v4, v4, Vector512.FusedMultiplyAdd(v5, v5, Vector512.FusedMultiplyAdd(v6, v6, v7 * v7)));

        [MethodImpl(MethodImplOptions.AggressiveInlining)]
        internal void Subtract(AlignedVector[] q, ReadOnlySpan<double> c, int start)
        {
            for (int j = 0; j < c.Length; j++)
            {
                ref double p = ref Unsafe.Add(ref q[j].Start, start);
                Vector512<double> factor = Vector512.Create(-c[j]);
                Cache.FetchNextBlock(ref p);
                v0 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p), factor, v0);
                v1 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p, 8), factor, v1);
                v2 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p, 16), factor, v2);
                v3 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p, 24), factor, v3);
                v4 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p, 32), factor, v4);
                v5 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p, 40), factor, v5);
                v6 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p, 48), factor, v6);
                v7 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p, 56), factor, v7);
            }
        }

        [MethodImpl(MethodImplOptions.AggressiveInlining)]
        internal readonly void AddDots(AlignedVector[] q, Span<Vector512<double>> sums, int start)
        {
            for (int j = 0; j < sums.Length; j++)
            {
                ref double p = ref Unsafe.Add(ref q[j].Start, start);
                Cache.FetchNextBlock(ref p);
                Vector512<double> a = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p), v0, sums[j]);
                Vector512<double> b = Vector512.LoadUnsafe(ref p, 8) * v1;
                Vector512<double> c = Vector512.LoadUnsafe(ref p, 16) * v2;
                Vector512<double> d = Vector512.LoadUnsafe(ref p, 24) * v3;
                a = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p, 32), v4, a);
                b = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p, 40), v5, b);
                c = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p, 48), v6, c);
                d = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref p, 56), v7, d);
                sums[j] = (a + b) + (c + d);
            }
        }
    }
}

/// <summary>Running sums of a sweep, eight a column; kept between sweeps.</summary>
internal sealed class SweepSums
{
    private Vector512<double>[] sums = new Vector512<double>[16];

    internal Span<Vector512<double>> Cleared(int count)
    {
        if (sums.Length < count) sums = new Vector512<double>[Math.Max(count, 2 * sums.Length)];
        Span<Vector512<double>> result = sums.AsSpan(0, count);
        result.Clear();
        return result;
    }
}
