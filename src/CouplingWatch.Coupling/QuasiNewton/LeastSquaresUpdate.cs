using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;

namespace CouplingWatch.Coupling.QuasiNewton;

/// <summary>
/// IQN-ILS: c = argmin ‖V c + r‖ over the columns the filter keeps, next = x̃ + W c.
/// Source: "Performance of a new partitioned procedure versus a monolithic procedure in fluid-structure interaction",
/// Computers and Structures 87 (2009) 793-801, DOI 10.1016/j.compstruc.2008.11.013; consecutive differences instead of
/// differences to the newest residual, which span the same space.
/// </summary>
internal static class LeastSquaresUpdate
{
    /// <summary>Writes the next vector and reports; null (and nothing written) when the filter keeps no column.</summary>
    public static UpdateReport? Try(SecantHistory history, MethodSettings settings, ReadOnlySpan<double> residual, ReadOnlySpan<double> output, Span<double> next)
    {
        var order = history.Order(settings.HistorySteps);
        if (order.Length == 0) return null;
        var filter = ColumnFilter.Apply(history.Basis, order, settings.FilterRule, settings.FilterThreshold);
        if (filter.Kept.Length == 0) return null;
        var qtr = new double[history.Basis.Rank];
        history.Basis.Project(residual, qtr, out var outside);
        var fit = SecantFit.Solve(filter, qtr, outside);
        output.CopyTo(next);
        for (var j = 0; j < fit.Alpha.Length; j++)
        {
            var w = history.Output(filter.Kept[j]);
            for (var i = 0; i < next.Length; i++) next[i] += fit.Alpha[j] * w[i];
        }
        return new UpdateReport
        {
            Columns = Names(history, filter.Kept),
            Left = Names(history, filter.Left),
            PackedR = Pack(filter.Triangle()),
            Coefficients = fit.Alpha,
            OutsideShare = fit.UncoveredShare,
        };
    }

    /// <summary>Names the columns the filter left out, for an update that became a relaxation.</summary>
    public static ColumnName[] LeftOut(SecantHistory history, MethodSettings settings) => [.. history.Order(settings.HistorySteps).Select(history.Name)];

    internal static ColumnName[] Names(SecantHistory history, ReadOnlySpan<int> arrivals)
    {
        var names = new ColumnName[arrivals.Length];
        for (var i = 0; i < names.Length; i++) names[i] = history.Name(arrivals[i]);
        return names;
    }

    private static double[] Pack(SmallMatrix r)
    {
        var packed = new double[r.Columns * (r.Columns + 1) / 2];
        var at = 0;
        for (var j = 0; j < r.Columns; j++)
            for (var i = 0; i <= j; i++) packed[at++] = r[i, j];
        return packed;
    }
}
