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

    /// <summary>With ‖Qᵀw‖ ≤ this · ‖w‖ the next pass cannot cancel, so that its rounding errors stay those of a unit vector.</summary>
    private const double EnoughToStop = 0.1;

    private const int MostPasses = 5;

    /// <summary>Share of its own norm below which the remainder of a column is rounding: 8 units of roundoff, growing with √rank.</summary>
    internal static double DependentBelow(int rank) => 8 * 1.11e-16 * Math.Sqrt(rank + 1.0);

    /// <summary>
    /// Writes c = Qᵀw to <paramref name="coefficients"/> and returns ‖w − Qc‖. With <paramref name="unit"/>, w ends as
    /// (w − Qc)/‖w − Qc‖ unless that is rounding; without, what w ends as does not matter and a last sweep is saved.
    /// </summary>
    internal static double Run(AlignedVector[] q, int rank, Span<double> w, double norm, Span<double> coefficients, ReductionBuffers buffers, bool unit)
    {
        Span<double> c = coefficients[..rank];
        Span<double> subtract = buffers.First(rank);
        Span<double> next = buffers.Second(rank);
        ColumnSweep.Dots(q, rank, w, c);
        c.CopyTo(subtract);
        double rounding = DependentBelow(rank) * norm;
        for (int pass = 1; ; pass++)
        {
            double left = rank == 0 ? norm : Math.Sqrt(ColumnSweep.SubtractThenDots(q, rank, w, subtract, next, buffers.Sums));
            double inside = LongVector.Norm(next);
            double outside = inside < left ? Math.Sqrt((left - inside) * (left + inside)) : 0;
            if (left <= rounding || outside == 0 || pass == MostPasses) return outside <= rounding ? outside : Close(w, outside, unit);
            if (inside <= OrthogonalTo * left) return Close(w, outside, unit);

            for (int i = 0; i < rank; i++) c[i] += next[i];
            if (inside <= EnoughToStop * left)
            {
                // Nearly all of what remains lies outside already: one more subtraction ends it, and needs no proof.
                if (unit) ColumnSweep.SubtractAndScale(q, rank, w, next, 1 / outside);
                return outside;
            }
            Span<double> free = subtract;
            subtract = next;
            next = free;
        }
    }

    private static double Close(Span<double> w, double norm, bool unit)
    {
        if (unit) ColumnSweep.Scale(w, 1 / norm);
        return norm;
    }
}
