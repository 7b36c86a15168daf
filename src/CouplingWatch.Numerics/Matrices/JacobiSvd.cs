using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Matrices;

/// <summary>
/// One-sided Jacobi singular value decomposition of a matrix with at least as many rows as columns. Plane rotations make the
/// columns orthogonal; their lengths are the singular values. Unlike the bidiagonal algorithm it keeps the relative accuracy
/// of small singular values when they are small because columns are small: the error is governed by the condition number
/// with unit columns, not by the raw one.
/// Source: "Jacobi's method is more accurate than QR", SIAM Journal on Matrix Analysis and Applications 13 (1992) 1204–1245
/// (from memory).
/// </summary>
internal static class JacobiSvd
{
    private const int MostSweeps = 40;

    /// <summary>
    /// Turns the columns of <paramref name="a"/> into U·Σ and <paramref name="v"/>, which starts as the identity, into V; both
    /// by falling singular value. Returns the singular values; without V only they are wanted.
    /// </summary>
    internal static double[] Run(SmallMatrix a, SmallMatrix? v)
    {
        int n = a.Columns;
        double largest = 0;
        for (int j = 0; j < n; j++) largest = Math.Max(largest, LongVector.LargestMagnitude(a.Column(j)));
        if (largest == 0) return new double[n];
        int exponent = Math.ILogB(largest);
        for (int j = 0; j < n; j++)
            foreach (ref double entry in a.Column(j)) entry = Math.ScaleB(entry, -exponent);

        var squares = new double[n];
        double orthogonal = 1.2e-16 * Math.Sqrt(a.Rows);
        bool turned = true;
        for (int sweep = 0; turned && sweep < MostSweeps; sweep++)
        {
            for (int j = 0; j < n; j++) squares[j] = LongVector.Dot(a.Column(j), a.Column(j));
            turned = Sweep(a, v, squares, orthogonal);
        }
        return Sort(a, v, exponent);
    }

    private static bool Sweep(SmallMatrix a, SmallMatrix? v, double[] squares, double orthogonal)
    {
        bool turned = false;
        for (int p = 0; p < a.Columns - 1; p++)
        {
            for (int q = p + 1; q < a.Columns; q++)
            {
                if (squares[p] == 0 && squares[q] == 0) continue;
                double product = LongVector.Dot(a.Column(p), a.Column(q));
                if (Math.Abs(product) <= orthogonal * Math.Sqrt(squares[p]) * Math.Sqrt(squares[q])) continue;
                turned = true;
                double zeta = (squares[q] - squares[p]) / (2 * product);
                double t = (zeta >= 0 ? 1 : -1) / (Math.Abs(zeta) + double.Hypot(1, zeta));
                double c = 1 / double.Hypot(1, t), s = c * t;
                LongVector.Rotate(a.Column(p), a.Column(q), c, -s);
                if (v is not null) LongVector.Rotate(v.Column(p), v.Column(q), c, -s);
                squares[p] = Turned(squares[p], -t * product, a.Column(p));
                squares[q] = Turned(squares[q], t * product, a.Column(q));
            }
        }
        return turned;
    }

    /// <summary>The square of a column after a rotation; formed afresh where the difference would cancel.</summary>
    private static double Turned(double before, double change, ReadOnlySpan<double> column)
    {
        double after = before + change;
        return after > 0.1 * before ? after : LongVector.Dot(column, column);
    }

    private static double[] Sort(SmallMatrix a, SmallMatrix? v, int exponent)
    {
        int n = a.Columns;
        var values = new double[n];
        for (int j = 0; j < n; j++) values[j] = LongVector.Norm(a.Column(j));
        int[] order = [.. Enumerable.Range(0, n).OrderByDescending(j => values[j])];
        if (v is not null) Reorder(a, v, order, exponent);
        return [.. order.Select(j => Math.ScaleB(values[j], exponent))];
    }

    private static void Reorder(SmallMatrix a, SmallMatrix v, int[] order, int exponent)
    {
        SmallMatrix oldA = a.Copy(), oldV = v.Copy();
        for (int j = 0; j < order.Length; j++)
        {
            Span<double> target = a.Column(j);
            oldA.Column(order[j]).CopyTo(target);
            foreach (ref double entry in target) entry = Math.ScaleB(entry, exponent);
            oldV.Column(order[j]).CopyTo(v.Column(j));
        }
    }
}
