using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;
using CouplingWatch.Numerics.Matrices;

namespace CouplingWatch.Numerics.Vectors;

/// <summary>
/// Sweeps over the columns of a tall matrix Q that is held column by column. Rows are taken in blocks that stay in the
/// second-level cache, so that subtracting Q·c and forming Qᵀv of what remains reads Q from memory once.
/// </summary>
internal static class ColumnSweep
{
    /// <summary>Rows of one block: 30 columns of 1,024 rows are 240 kB.</summary>
    internal const int BlockRows = 1024;

    /// <summary>c = Qᵀv for the first <paramref name="count"/> columns.</summary>
    internal static void Dots(double[][] q, int count, ReadOnlySpan<double> v, Span<double> c)
    {
        c[..count].Clear();
        for (int start = 0; start < v.Length; start += BlockRows)
        {
            int length = Math.Min(BlockRows, v.Length - start);
            BlockDots(q, count, start, v.Slice(start, length), c);
        }
    }

    /// <summary>v ← v − Q·c, then d = Qᵀv; returns ‖v‖² of what remains. Reads Q once.</summary>
    internal static double SubtractThenDots(double[][] q, int count, Span<double> v, ReadOnlySpan<double> c, Span<double> d)
    {
        d[..count].Clear();
        double squares = 0;
        for (int start = 0; start < v.Length; start += BlockRows)
        {
            Span<double> block = v.Slice(start, Math.Min(BlockRows, v.Length - start));
            BlockSubtract(q, count, start, block, c);
            BlockDots(q, count, start, block, d);
            squares += LongVector.Dot(block, block);
        }
        return squares;
    }

    /// <summary>v ← v − Q·c; returns ‖v‖² of what remains. Reads Q once.</summary>
    internal static double Subtract(double[][] q, int count, Span<double> v, ReadOnlySpan<double> c)
    {
        double squares = 0;
        for (int start = 0; start < v.Length; start += BlockRows)
        {
            Span<double> block = v.Slice(start, Math.Min(BlockRows, v.Length - start));
            BlockSubtract(q, count, start, block, c);
            squares += LongVector.Dot(block, block);
        }
        return squares;
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

    /// <summary>
    /// Replaces the columns first … first + count − 1 of Q by their product with G (count × newCount), in place, block by
    /// block: one read and one write of Q. The columns past newCount keep leftovers.
    /// </summary>
    internal static void Rotate(double[][] q, int first, int count, SmallMatrix g, int newCount, int rows)
    {
        const int block = 256;
        var old = new double[count * block];
        for (int start = 0; start < rows; start += block)
        {
            int n = Math.Min(block, rows - start);
            for (int l = 0; l < count; l++) q[first + l].AsSpan(start, n).CopyTo(old.AsSpan(l * block));
            for (int j = 0; j < newCount; j++)
            {
                Span<double> target = q[first + j].AsSpan(start, n);
                target.Clear();
                ReadOnlySpan<double> factors = g.Column(j);
                for (int l = 0; l < count; l++)
                    if (factors[l] != 0) LongVector.AddScaled(target, factors[l], old.AsSpan(l * block, n));
            }
        }
    }

    private static void BlockDots(double[][] q, int count, int start, ReadOnlySpan<double> v, Span<double> c)
    {
        ref double x = ref MemoryMarshal.GetReference(v);
        int n = v.Length, j = 0;
        for (; j + 4 <= count; j += 4)
        {
            ref double q0 = ref q[j][start];
            ref double q1 = ref q[j + 1][start];
            ref double q2 = ref q[j + 2][start];
            ref double q3 = ref q[j + 3][start];
            Vector512<double> s0 = default, s1 = default, s2 = default, s3 = default;
            int i = 0;
            for (; i <= n - 8; i += 8)
            {
                Vector512<double> value = Vector512.LoadUnsafe(ref x, (nuint)i);
                s0 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref q0, (nuint)i), value, s0);
                s1 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref q1, (nuint)i), value, s1);
                s2 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref q2, (nuint)i), value, s2);
                s3 = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref q3, (nuint)i), value, s3);
            }
            double t0 = Vector512.Sum(s0), t1 = Vector512.Sum(s1), t2 = Vector512.Sum(s2), t3 = Vector512.Sum(s3);
            for (; i < n; i++)
            {
                double value = v[i];
                t0 = Math.FusedMultiplyAdd(q[j][start + i], value, t0);
                t1 = Math.FusedMultiplyAdd(q[j + 1][start + i], value, t1);
                t2 = Math.FusedMultiplyAdd(q[j + 2][start + i], value, t2);
                t3 = Math.FusedMultiplyAdd(q[j + 3][start + i], value, t3);
            }
            c[j] += t0;
            c[j + 1] += t1;
            c[j + 2] += t2;
            c[j + 3] += t3;
        }
        for (; j < count; j++) c[j] += LongVector.Dot(q[j].AsSpan(start, n), v);
    }

    private static void BlockSubtract(double[][] q, int count, int start, Span<double> v, ReadOnlySpan<double> c)
    {
        ref double x = ref MemoryMarshal.GetReference(v);
        int n = v.Length, j = 0;
        for (; j + 4 <= count; j += 4)
        {
            ref double q0 = ref q[j][start];
            ref double q1 = ref q[j + 1][start];
            ref double q2 = ref q[j + 2][start];
            ref double q3 = ref q[j + 3][start];
            Vector512<double> c0 = Vector512.Create(-c[j]), c1 = Vector512.Create(-c[j + 1]), c2 = Vector512.Create(-c[j + 2]), c3 = Vector512.Create(-c[j + 3]);
            int i = 0;
            for (; i <= n - 8; i += 8)
            {
                Vector512<double> value = Vector512.LoadUnsafe(ref x, (nuint)i);
                value = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref q0, (nuint)i), c0, value);
                value = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref q1, (nuint)i), c1, value);
                value = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref q2, (nuint)i), c2, value);
                value = Vector512.FusedMultiplyAdd(Vector512.LoadUnsafe(ref q3, (nuint)i), c3, value);
                value.StoreUnsafe(ref x, (nuint)i);
            }
            for (; i < n; i++)
            {
                double value = v[i];
                value = Math.FusedMultiplyAdd(-c[j], q[j][start + i], value);
                value = Math.FusedMultiplyAdd(-c[j + 1], q[j + 1][start + i], value);
                value = Math.FusedMultiplyAdd(-c[j + 2], q[j + 2][start + i], value);
                v[i] = Math.FusedMultiplyAdd(-c[j + 3], q[j + 3][start + i], value);
            }
        }
        for (; j < count; j++) LongVector.AddScaled(v, -c[j], q[j].AsSpan(start, n));
    }
}
