using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Vectors;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Basis;

/// <summary>The triangular factor a code sends with its update (level 2): R packed by columns, and the coefficients.</summary>
internal static class ReportedTriangle
{
    /// <summary>R as a matrix; null when it was not sent, has the wrong length or an entry that is not finite.</summary>
    public static SmallMatrix? Of(BasisReport report)
    {
        var n = report.Columns.Length;
        if (report.R is not { } packed || n == 0 || packed.Length != n * (n + 1) / 2) return null;
        foreach (var entry in packed)
            if (!double.IsFinite(entry)) return null;
        var matrix = new SmallMatrix(n, n);
        var at = 0;
        for (var j = 0; j < n; j++)
            for (var i = 0; i <= j; i++) matrix[i, j] = packed[at++];
        return matrix;
    }

    /// <summary>c = √(1 − min(1, ‖Rα‖/‖r‖)²) and ‖α‖; NaN where R, the coefficients or the norm do not give them.</summary>
    public static (double Uncovered, double AlphaNorm) Promise(BasisReport report, double norm)
    {
        if (report.Coefficients is not { } alpha || alpha.Length != report.Columns.Length) return (double.NaN, double.NaN);
        var alphaNorm = LongVector.Norm(alpha);
        if (Of(report) is not { } triangle || !double.IsFinite(alphaNorm) || !(norm > 0) || !double.IsFinite(norm)) return (double.NaN, alphaNorm);
        var covered = Math.Min(1, LongVector.Norm(triangle.Times(alpha)) / norm);
        return (Math.Sqrt(1 - covered * covered), alphaNorm);
    }
}
