using CouplingWatch.Numerics.Matrices;

namespace CouplingWatch.Numerics.Secants;

/// <summary>
/// The pivot-ratio rule on a triangle: leaving a column out turns the columns behind it into a Hessenberg form that plane
/// rotations restore, columns² operations each time instead of a new factorisation.
/// Source: Golub and Van Loan, Matrix Computations, 3rd ed., §12.5 (deleting a column; from memory).
/// </summary>
internal static class PivotSweep
{
    internal static void Run(ReadOnlySpan<double[]> columns, double[] norms, int rank, double threshold, ColumnEntry[] entries)
    {
        List<double[]> r = Triangle(columns, rank);
        var place = new List<int>(columns.Length);
        for (int i = 0; i < columns.Length; i++) place.Add(i);
        while (r.Count > 0)
        {
            double largest = 0;
            for (int i = 0; i < r.Count; i++) largest = Math.Max(largest, Math.Abs(r[i][i]));
            int offender = -1;
            for (int i = 0; i < r.Count && offender < 0; i++)
            {
                double direction = Math.Abs(r[i][i]);
                if (direction < threshold * largest || ColumnFilter.IsZero(direction, norms[place[i]], rank)) offender = i;
            }
            if (offender < 0) return;
            double own = Math.Abs(r[offender][offender]);
            int entry = place[offender];
            entries[entry] = entries[entry] with { Fate = ColumnFate.Left, NewDirection = own, Share = largest > 0 ? own / largest : 0 };
            Delete(r, offender);
            place.RemoveAt(offender);
        }
    }

    private static List<double[]> Triangle(ReadOnlySpan<double[]> columns, int rank)
    {
        int size = Math.Max(rank, columns.Length);
        var factor = new GrowingQr(size);
        foreach (double[] column in columns)
        {
            factor.Offer(column);
            factor.Keep();
        }
        var r = new List<double[]>(columns.Length);
        for (int j = 0; j < columns.Length; j++)
        {
            var entries = new double[columns.Length + 1];
            for (int i = 0; i <= j; i++) entries[i] = factor.R(i, j);
            r.Add(entries);
        }
        return r;
    }

    private static void Delete(List<double[]> r, int index)
    {
        r.RemoveAt(index);
        for (int row = index; row < r.Count; row++)
        {
            double above = r[row][row], below = r[row][row + 1];
            if (below == 0) continue;
            double length = double.Hypot(above, below);
            double c = above / length, s = below / length;
            r[row][row] = length;
            r[row][row + 1] = 0;
            for (int j = row + 1; j < r.Count; j++)
            {
                double upper = r[j][row], lower = r[j][row + 1];
                r[j][row] = Math.FusedMultiplyAdd(c, upper, s * lower);
                r[j][row + 1] = Math.FusedMultiplyAdd(c, lower, -s * upper);
            }
        }
    }
}
