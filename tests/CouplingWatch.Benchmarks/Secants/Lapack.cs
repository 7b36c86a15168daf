using System.Runtime.InteropServices;

namespace CouplingWatch.Benchmarks.Secants;

/// <summary>LAPACK's dgeqrf and dorgqr from the library of the system, on one thread; absent where there is none.</summary>
internal sealed unsafe class Lapack
{
    private static readonly string[] Names = ["libopenblas.so.0", "libopenblas.so", "liblapack.so.3", "liblapack.so", "libopenblas.dll", "/System/Library/Frameworks/Accelerate.framework/Accelerate"];

    private readonly delegate* unmanaged<int*, int*, double*, int*, double*, double*, int*, int*, void> factor;
    private readonly delegate* unmanaged<int*, int*, int*, double*, int*, double*, double*, int*, int*, void> form;

    private Lapack(string name, nint factor, nint form)
    {
        Name = name;
        this.factor = (delegate* unmanaged<int*, int*, double*, int*, double*, double*, int*, int*, void>)factor;
        this.form = (delegate* unmanaged<int*, int*, int*, double*, int*, double*, double*, int*, int*, void>)form;
    }

    internal string Name { get; }

    internal static Lapack? Find()
    {
        foreach (string name in Names)
        {
            if (!NativeLibrary.TryLoad(name, out nint library)) continue;
            if (!NativeLibrary.TryGetExport(library, "dgeqrf_", out nint factor) || !NativeLibrary.TryGetExport(library, "dorgqr_", out nint form)) continue;
            if (NativeLibrary.TryGetExport(library, "openblas_set_num_threads", out nint threads)) ((delegate* unmanaged<int, void>)threads)(1);
            return new Lapack(name, factor, form);
        }
        return null;
    }

    /// <summary>Householder factorisation in place, R and the reflectors only (no Q).</summary>
    internal void Factor(double[] a, int rows, int columns, double[] tau, double[] work)
    {
        int m = rows, n = columns, length = work.Length, info = 0;
        fixed (double* pa = a, pt = tau, pw = work) factor(&m, &n, pa, &m, pt, pw, &length, &info);
        if (info != 0) throw new InvalidOperationException($"dgeqrf returned {info}");
    }

    /// <summary>Forms the thin Q from the reflectors in place.</summary>
    internal void FormQ(double[] a, int rows, int columns, double[] tau, double[] work)
    {
        int m = rows, n = columns, k = columns, length = work.Length, info = 0;
        fixed (double* pa = a, pt = tau, pw = work) form(&m, &n, &k, pa, &m, pt, pw, &length, &info);
        if (info != 0) throw new InvalidOperationException($"dorgqr returned {info}");
    }
}
