using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Numerics.Conditioning;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>The condition of the columns in use, for the plot over time: shown, never an alarm.</summary>
internal static class ConditionReader
{
    /// <summary>At the latest iteration; null when no column is kept or nothing is known of them.</summary>
    /// <param name="reported">The latest report of the code, for runs that send no vectors.</param>
    public static ConditionPoint? Now(RunState run, (int Step, int Iteration, BasisReport Report)? reported)
    {
        foreach (var group in run.Basis.Groups)
        {
            if (group.Columns is not { Count: > 0 } store || group.Vectors.Newest is not { Finite: true } vector) continue;
            var order = store.Order(vector.Ordinal, vector.Iteration, run.HistorySteps, out _);
            var rule = GroupBasis.RuleOf(run.Settings.FilterRule ?? FilterRule.None) ?? SecantFilter.None;
            if (order.Length == 0 || ColumnFilter.Apply(store.Secants, order, rule, UpdateJudge.ThresholdOf(run)) is not { Kept.Length: > 0 } kept) return null;
            return Point(run, vector.Step, vector.Iteration, ConditionNumber.Of(kept.Triangle()));
        }
        return reported is { } sent && ReportedTriangle.Of(sent.Report) is { } triangle ? Point(run, sent.Step, sent.Iteration, ConditionNumber.Of(triangle)) : null;
    }

    private static ConditionPoint Point(RunState run, int step, int iteration, ConditionNumber number) =>
        new(step, iteration, number.Raw, number.UnitColumns, number.UnitColumns * run.DeclaredNoise);
}
