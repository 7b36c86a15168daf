using CouplingWatch.Benchmarks.Timing;
using CouplingWatch.Numerics.Conditioning;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Trials;

namespace CouplingWatch.Benchmarks.Secants;

/// <summary>Everything that is answered on the small matrix, and one whole level-3 iteration of the numerics.</summary>
internal static class SmallMatrixBenchmark
{
    internal static void Run(Table table)
    {
        foreach (int count in new[] { 40, 100 })
        {
            SecantBasis basis = Basis(4096, count, out double[] r);
            int[] order = [.. Enumerable.Range(0, count).Reverse()];
            var projection = new double[count + 1];
            FilterOutcome outcome = ColumnFilter.Apply(basis, order, SecantFilter.OwnNorm, 1e-4);
            basis.Project(r, projection, out double outside);
            Timing.Timing[] times = Alternating.Measure(200,
                (() => { }, () => ColumnFilter.Apply(basis, order, SecantFilter.OwnNorm, 1e-2)),
                (() => { }, () => ColumnFilter.Apply(basis, order, SecantFilter.PivotRatio, 1e-2)),
                (() => { }, () => SecantFit.Solve(outcome, projection, outside)),
                (() => { }, () => ConditionNumber.Of(outcome.Triangle())),
                (() => { }, () => Incremental(outcome)));
            table.Row($"filter {count} columns, own-norm", times[0].Smallest, "a few ms");
            table.Row($"filter {count} columns, pivot-ratio", times[1].Smallest, "a few ms");
            table.Row($"coefficients and shares, {count} columns", times[2].Smallest, "–");
            table.Row($"condition number raw and with unit columns, {count} columns", times[3].Smallest, "–");
            table.Row($"incremental estimate of it, {count} columns", times[4].Smallest, "–");
        }
        WholeIteration(table);
    }

    private static void WholeIteration(Table table)
    {
        SecantBasis basis = Basis(4096, 39, out double[] r);
        double[] newest = Columns(4096, 1, 5)[0];
        int[] order = [.. Enumerable.Range(0, 40).Reverse()];
        var projection = new double[41];
        Timing.Timing time = Alternating.Measure(200, (() => { if (basis.ColumnCount > 39) basis.RemoveAt(39); }, () =>
        {
            basis.Append(newest);
            basis.Project(r, projection, out double outside);
            FilterOutcome outcome = ColumnFilter.Apply(basis, order, SecantFilter.OwnNorm, 1e-4);
            SecantFit.Solve(outcome, projection, outside, 3);
        }
        ))[0];
        table.Row("append, project, filter and fit, 4,096 × 40", time.Smallest, "≤ 1 ms");
        Timing.Timing drop = Alternating.Measure(100, (() => Refill(basis, newest), () => basis.RemoveOldest(4)))[0];
        table.Row("drop the four oldest of 40 columns, 4,096 rows", drop.Smallest, "–");
    }

    private static void Refill(SecantBasis basis, double[] newest)
    {
        var random = new SplitMix64((ulong)basis.ColumnCount);
        while (basis.ColumnCount < 40)
        {
            var column = (double[])newest.Clone();
            for (int i = 0; i < column.Length; i++) column[i] += random.NextNormal();
            basis.Append(column);
        }
    }

    private static void Incremental(FilterOutcome outcome)
    {
        var estimate = new IncrementalCondition();
        var r = outcome.Triangle();
        for (int j = 0; j < r.Columns; j++) estimate.Add(r.Column(j)[..(j + 1)]);
    }

    private static SecantBasis Basis(int rows, int count, out double[] r)
    {
        double[][] columns = Columns(rows, count + 1, 3);
        var basis = new SecantBasis(rows, count + 1);
        for (int j = 0; j < count; j++) basis.Append(columns[j]);
        r = columns[count];
        return basis;
    }

    /// <summary>Columns that lean on one another so that a threshold of 1e-2 leaves some of them out.</summary>
    private static double[][] Columns(int rows, int count, ulong seed)
    {
        var random = new SplitMix64(seed);
        var columns = new double[count][];
        for (int j = 0; j < count; j++)
        {
            columns[j] = new double[rows];
            double own = j % 3 == 0 ? 1 : 1e-3;
            for (int i = 0; i < rows; i++) columns[j][i] = (own * random.NextNormal()) + (j > 0 ? columns[j - 1][i] : 0);
        }
        return columns;
    }
}
