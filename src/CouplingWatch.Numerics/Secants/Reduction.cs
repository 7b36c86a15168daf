using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Secants;

/// <summary>
/// Classical Gram–Schmidt against an orthonormal basis, repeated until what remains is orthogonal to it. The inner products
/// that prove it are formed in the same sweep as the subtraction, so the proof costs no extra read of Q.
/// Source: "The loss of orthogonality in the Gram–Schmidt orthogonalization process", Computers and Mathematics with
/// Applications 50 (2005) 1069–1075 (twice is enough; from memory).
/// </summary>
internal static class Reduction
{
    /// <summary>‖Qᵀw‖ ≤ this · ‖w‖ counts as orthogonal.</summary>
    internal const double OrthogonalTo = 1e-15;

    private const int MostPasses = 5;

    /// <summary>Share of its own norm below which the remainder of a column is rounding: 8 units of roundoff, growing with √rank.</summary>
    internal static double DependentBelow(int rank) => 8 * 1.11e-16 * Math.Sqrt(rank + 1.0);

    /// <summary>
    /// Writes c = Qᵀw to <paramref name="coefficients"/> and leaves w − Qc in <paramref name="w"/>; returns its norm, with
    /// the part still inside the span taken off.
    /// </summary>
    internal static double Run(double[][] q, int rank, Span<double> w, double norm, Span<double> coefficients, Span<double> step)
    {
        if (rank == 0) return norm;
        Span<double> c = coefficients[..rank];
        Span<double> d = step[..rank];
        ColumnSweep.Dots(q, rank, w, c);
        d.Clear();
        Span<double> subtract = c;
        Span<double> next = d;
        double[]? third = null;
        for (int pass = 1; ; pass++)
        {
            double left = Math.Sqrt(ColumnSweep.SubtractThenDots(q, rank, w, subtract, next));
            if (pass > 1)
                for (int i = 0; i < rank; i++) c[i] += subtract[i];
            double inside = LongVector.Norm(next);
            if (inside <= OrthogonalTo * left || left <= DependentBelow(rank) * norm || pass == MostPasses)
                return inside < left ? Math.Sqrt((left - inside) * (left + inside)) : 0;
            third ??= new double[rank];
            Span<double> free = pass == 1 ? third : subtract;
            subtract = next;
            next = free;
        }
    }
}
