using CouplingWatch.Numerics.Secants;

namespace CouplingWatch.Coupling.QuasiNewton;

/// <summary>
/// The multi-vector method in linear memory: J = J_prev + (W − J_prev V) V⁺ is applied without being formed, as a walk from the step in
/// hand back through the steps of the history. Every step answers for the part of the residual in the span of its own columns and hands
/// the rest to the step before it; what is left at the end is the fixed point's.
/// Sources: "Quasi-Newton methods for implicit black-box FSI coupling", Comput. Methods Appl. Mech. Engrg. 279 (2014) 113-132,
/// DOI 10.1016/j.cma.2014.06.033; the linear form: Comput. Methods Appl. Mech. Engrg. 361 (2020) 112810 (both from memory).
/// </summary>
internal static class MultiStepUpdate
{
    /// <summary>Writes the next vector and reports; null (and nothing written) when no step has a column to use.</summary>
    public static UpdateReport? Try(SecantHistory history, MethodSettings settings, ReadOnlySpan<double> residual, ReadOnlySpan<double> output, Span<double> next)
    {
        var basis = history.Basis;
        if (history.Order(settings.HistorySteps).Length == 0) return null;
        var rest = new double[basis.Rank];
        basis.Project(residual, rest, out var outside);
        var whole = Norm(residual);
        List<ColumnName> used = [], left = [];
        List<double> coefficients = [];
        output.CopyTo(next);
        foreach (var order in history.OrderByStep(settings.HistorySteps))
        {
            var filter = ColumnFilter.Apply(basis, order, settings.FilterRule, settings.FilterThreshold);
            left.AddRange(LeastSquaresUpdate.Names(history, filter.Left));
            if (filter.Kept.Length == 0) continue;
            var fit = SecantFit.Solve(filter, rest, outside);
            used.AddRange(LeastSquaresUpdate.Names(history, filter.Kept));
            coefficients.AddRange(fit.Alpha);
            for (var j = 0; j < fit.Alpha.Length; j++)
            {
                var w = history.Output(filter.Kept[j]);
                for (var i = 0; i < next.Length; i++) next[i] += fit.Alpha[j] * w[i];
                var entries = basis.ColumnCoefficients(filter.Kept[j]);
                for (var i = 0; i < entries.Length; i++) rest[i] += fit.Alpha[j] * entries[i];
            }
        }
        if (used.Count == 0) return null;
        return new UpdateReport
        {
            Columns = used,
            Left = left,
            Coefficients = coefficients,
            OutsideShare = whole > 0 ? double.Hypot(Norm(rest), outside) / whole : 1,
        };
    }

    private static double Norm(ReadOnlySpan<double> v)
    {
        var sum = 0.0;
        foreach (var value in v) sum += value * value;
        return Math.Sqrt(sum);
    }
}
