using CouplingWatch.Benchmarks.Timing;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Trials;
using MathNet.Numerics.LinearAlgebra.Double;
using MathNet.Numerics.LinearAlgebra.Factorization;

namespace CouplingWatch.Benchmarks.Secants;

/// <summary>Appending one more column to 29 columns of 100,000 rows.</summary>
internal static class AppendBenchmark
{
    private const int Rows = 100_000, Columns = 29;

    internal static void Run(Table table)
    {
        double[][] columns = Leaning(Columns + 1);
        double[] newest = columns[Columns];
        var basis = new SecantBasis(Rows, Columns + 1);
        for (int j = 0; j < Columns; j++) basis.Append(columns[j]);
        var sweep = new MemorySweep(Rows, Columns);

        Action drop = () => { if (basis.ColumnCount > Columns) basis.RemoveAt(Columns); }, append = () => basis.Append(newest);
        Timing.Timing[] times = Alternating.Measure(80, (drop, append), (() => { }, () => sweep.Read(3)));
        Ratio(table, "append a column to 100,000 × 29 (leaning: two passes, three sweeps)", times[0], "three bare sweeps over 29 columns and the vector", times[1], slower: false, "≤ 1.5");

        double[] unrelated = Normal(new SplitMix64(99));
        times = Alternating.Measure(80, (drop, () => basis.Append(unrelated)), (() => { }, () => sweep.Read(2)));
        Ratio(table, "append an unrelated column (one pass is enough)", times[0], "two bare sweeps", times[1], slower: false, "–");
        drop();
        var projection = new double[Columns];
        times = Alternating.Measure(80, (() => { }, () => basis.Project(unrelated, projection, out _)), (() => { }, () => sweep.Read(2)));
        Ratio(table, "project a residual on 29 directions", times[0], "two bare sweeps", times[1], slower: false, "–");

        // Against a fresh factorisation both sides find their matrix in the cache, as far as it fits: that one was just written.
        Action warm = () => { drop(); basis.Project(unrelated, projection, out _); };
        MathNet.Numerics.Control.UseSingleThread();
        var matrix = DenseMatrix.OfColumnArrays(columns);
        times = Alternating.Measure(5, (warm, append), (() => { }, () => matrix.QR(QRMethod.Thin)));
        Ratio(table, "append a column to 100,000 × 29", times[0], "MathNet thin QR of all 30 afresh", times[1], slower: true, "≥ 50");
        AgainstLapack(table, columns, warm, append);
    }

    private static void AgainstLapack(Table table, double[][] columns, Action warm, Action append)
    {
        if (Lapack.Find() is not { } lapack)
        {
            table.Skipped("append against LAPACK dgeqrf", "no LAPACK library found on this machine");
            return;
        }
        int n = columns.Length;
        double[] packed = [.. columns.SelectMany(c => c)], a = new double[packed.Length], tau = new double[n], work = new double[64 * n];
        Timing.Timing[] times = Alternating.Measure(40, (warm, append), (() => packed.CopyTo(a, 0), () => lapack.Factor(a, Rows, n, tau, work)));
        Ratio(table, "append a column to 100,000 × 29", times[0], $"LAPACK dgeqrf of all 30 afresh, R only ({lapack.Name}, one thread)", times[1], slower: true, "≥ 8");
        times = Alternating.Measure(20, (warm, append), (() => packed.CopyTo(a, 0), () => { lapack.Factor(a, Rows, n, tau, work); lapack.FormQ(a, Rows, n, tau, work); }));
        Ratio(table, "append a column to 100,000 × 29", times[0], $"LAPACK dgeqrf and dorgqr afresh, with Q as the basis has it ({lapack.Name}, one thread)", times[1], slower: true, "–");
    }

    private static void Ratio(Table table, string what, Timing.Timing own, string against, Timing.Timing other, bool slower, string goal) =>
        table.Row(what, own.Smallest, against, other.Smallest, slower ? other.Smallest / own.Smallest : own.Smallest / other.Smallest, goal);

    /// <summary>Columns as a coupled run leaves them: each leans on the one before it.</summary>
    private static double[][] Leaning(int count)
    {
        var columns = new double[count][];
        for (int j = 0; j < count; j++)
        {
            columns[j] = Normal(new SplitMix64((ulong)j));
            if (j > 0)
                for (int i = 0; i < Rows; i++) columns[j][i] = columns[j - 1][i] + (1e-3 * columns[j][i]);
        }
        return columns;
    }

    private static double[] Normal(SplitMix64 random)
    {
        var column = new double[Rows];
        for (int i = 0; i < Rows; i++) column[i] = random.NextNormal();
        return column;
    }
}
