using CouplingWatch.Coupling.Surrogates;
using CouplingWatch.Numerics.Secants;

namespace CouplingWatch.Coupling.QuasiNewton;

/// <summary>
/// IQN-ILSM: the secants answer for the residual in their span, the surrogate for what is left, the fixed point for what the surrogate
/// leaves: dx̃ = W R⁻¹Qᵀ dr + J_s (I − QQᵀ) dr with dr = −r.
/// Source: "Surrogate-based acceleration of quasi-Newton techniques for fluid-structure interaction simulations", Computers and
/// Structures 260 (2022) 106720, DOI 10.1016/j.compstruc.2021.106720 (formula from memory).
/// </summary>
internal static class SurrogateUpdate
{
    public static UpdateReport Run(SecantHistory history, MethodSettings settings, ISurrogate surrogate, ReadOnlySpan<double> residual, ReadOnlySpan<double> output, Span<double> next)
    {
        var left = residual.ToArray();
        var report = LeastSquaresUpdate.Try(history, settings, residual, output, next);
        if (report is null) output.CopyTo(next);
        else Remove(history, settings, residual, report, left);
        double whole = 0, rest = 0;
        for (var i = 0; i < left.Length; i++)
        {
            whole += residual[i] * residual[i];
            rest += left[i] * left[i];
            left[i] = -left[i];
        }
        var iterations = surrogate.Add(left, next);
        return (report ?? new UpdateReport { Left = LeastSquaresUpdate.LeftOut(history, settings) }) with
        {
            Surrogate = new SurrogateShare(iterations, whole > 0 ? Math.Sqrt(rest / whole) : 0),
        };
    }

    /// <summary>left ← r + V c, formed from Q so that no long column has to be kept: r plus the change of its components.</summary>
    private static void Remove(SecantHistory history, MethodSettings settings, ReadOnlySpan<double> residual, UpdateReport report, double[] left)
    {
        var basis = history.Basis;
        var change = new double[basis.Rank];
        var order = history.Order(settings.HistorySteps);
        for (var c = 0; c < report.Columns.Count; c++)
        {
            var arrival = Array.Find(order, a => history.Name(a) == report.Columns[c]);
            var entries = basis.ColumnCoefficients(arrival);
            for (var i = 0; i < entries.Length; i++) change[i] += report.Coefficients[c] * entries[i];
        }
        for (var d = 0; d < change.Length; d++)
        {
            var direction = basis.Direction(d);
            for (var i = 0; i < left.Length; i++) left[i] += change[d] * direction[i];
        }
    }
}
