using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Numerics.Conditioning;
using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>The secant ledger: what each column brings, which are kept, and what another rule or threshold would do instead.</summary>
internal static class BasisReader
{
    /// <summary>Condition of the columns kept at the latest iteration; null when none is kept or nothing is known of them.</summary>
    public static ConditionPoint? ConditionNow(RunState run, (int Step, int Iteration, BasisReport Report)? reported)
    {
        foreach (var group in run.Basis.Groups)
        {
            if (group.Columns is not { Count: > 0 } store || Stored(group, null, null) is not { } vector) continue;
            var order = store.Order(vector.Ordinal, vector.Iteration, run.HistorySteps, out _);
            var rule = GroupBasis.RuleOf(Known(run.Settings.FilterRule)) ?? SecantFilter.None;
            if (order.Length == 0 || ConditionOf(ColumnFilter.Apply(store.Secants, order, rule, UpdateJudge.ThresholdOf(run))) is not { } condition) return null;
            return new ConditionPoint(vector.Step, vector.Iteration, condition.Raw, condition.UnitColumns, condition.UnitColumns * run.DeclaredNoise);
        }
        if (reported is not { } sent || ReportedTriangle.Of(sent.Report) is not { } triangle) return null;
        var number = ConditionNumber.Of(triangle);
        return new ConditionPoint(sent.Step, sent.Iteration, number.Raw, number.UnitColumns, number.UnitColumns * run.DeclaredNoise);
    }

    /// <param name="reported">The latest report of the code, for runs that send no vectors.</param>
    /// <param name="step">The latest when null; null is answered for one that is no longer kept.</param>
    public static BasisView? At(RunState run, (int Step, int Iteration, BasisReport Report)? reported, int? step, int? iteration, FilterRule? rule, double? threshold)
    {
        foreach (var group in run.Basis.Groups)
        {
            if (group.Columns is not { Count: > 0 } store) continue;
            if (Stored(group, step, iteration) is not { } vector) continue;
            var order = store.Order(vector.Ordinal, vector.Iteration, run.HistorySteps, out _);
            if (order.Length == 0) continue;
            return FromVectors(run, group, store, vector, order, rule, threshold);
        }
        if (reported is not { } sent || (step is { } s && s != sent.Step) || (iteration is { } i && i != sent.Iteration)) return null;
        return FromReport(run, sent.Step, sent.Iteration, sent.Report);
    }

    /// <summary>The rules and thresholds shown beside the ones in force.</summary>
    public static IReadOnlyList<(FilterRule Rule, double Threshold)> Alternatives(RunState run, FilterRule rule, double threshold)
    {
        List<(FilterRule, double)> all = [(rule, threshold)];
        foreach (var other in new[] { FilterRule.OwnNorm, FilterRule.PivotRatio })
        {
            var advised = AdvisedThreshold.Of(run, other);
            foreach (var candidate in new[] { advised, Math.Min(1e-1, advised * 100) })
                if (!all.Contains((other, candidate))) all.Add((other, candidate));
        }
        return all;
    }

    private static StoredIteration? Stored(GroupBasis group, int? step, int? iteration)
    {
        for (var i = group.Vectors.Count - 1; i >= 0; i--)
        {
            var entry = group.Vectors[i];
            if ((step is null || entry.Step == step) && (iteration is null || entry.Iteration == iteration)) return entry.Finite ? entry : null;
        }
        return null;
    }

    private static BasisView FromVectors(RunState run, GroupBasis group, ColumnStore store, StoredIteration vector, int[] order, FilterRule? rule, double? threshold)
    {
        var inForce = (Rule: Known(run.Settings.FilterRule), Threshold: UpdateJudge.ThresholdOf(run));
        var used = (Rule: rule is null ? inForce.Rule : Known(rule), Threshold: threshold ?? inForce.Threshold);
        var directions = new double[store.Secants.Rank];
        store.Secants.Project(vector.Residual, directions, out var outside);
        var outcome = ColumnFilter.Apply(store.Secants, order, GroupBasis.RuleOf(used.Rule) ?? SecantFilter.None, used.Threshold);
        var columns = new List<BasisColumn>(outcome.Columns.Length);
        foreach (var entry in outcome.Columns)
        {
            var birth = store.Birth(entry.Index);
            columns.Add(new BasisColumn(birth, vector.Step - birth.Step, entry.Share, entry.Fate == ColumnFate.Kept));
        }
        var condition = ConditionOf(outcome);
        List<WhatIf> whatIf = [];
        foreach (var (otherRule, otherThreshold) in Alternatives(run, inForce.Rule, inForce.Threshold))
        {
            var other = ColumnFilter.Apply(store.Secants, order, GroupBasis.RuleOf(otherRule) ?? SecantFilter.None, otherThreshold);
            whatIf.Add(new WhatIf(otherRule, otherThreshold, (otherRule, otherThreshold) == inForce, other.Kept.Length, ConditionOf(other)?.UnitColumns,
                SecantFit.Solve(other, directions, outside).UncoveredShare));
        }
        return new BasisView
        {
            Step = vector.Step,
            Iteration = vector.Iteration,
            Group = group.Group,
            Rule = used.Rule,
            Threshold = used.Threshold,
            Source = group.Sketched ? "sketch" : "vectors",
            Columns = columns,
            Kept = outcome.Kept.Length,
            Condition = condition?.Raw,
            ConditionUnit = condition?.UnitColumns,
            CoefficientError = condition?.UnitColumns * run.DeclaredNoise,
            Uncovered = SecantFit.Solve(outcome, directions, outside).UncoveredShare,
            AdvisedThreshold = AdvisedThreshold.Of(run, used.Rule),
            DeclaredNoise = run.DeclaredNoise,
            WhatIf = whatIf,
        };
    }

    private static BasisView FromReport(RunState run, int step, int iteration, BasisReport report)
    {
        var rule = Known(run.Settings.FilterRule);
        var triangle = ReportedTriangle.Of(report);
        var condition = triangle is null ? (ConditionNumber?)null : ConditionNumber.Of(triangle);
        var columns = new List<BasisColumn>(report.Columns.Length + report.Left.Length);
        for (var i = 0; i < report.Columns.Length; i++) columns.Add(new BasisColumn(report.Columns[i], step - report.Columns[i].Step, triangle is null ? double.NaN : Share(triangle, i, rule), true));
        foreach (var birth in report.Left) columns.Add(new BasisColumn(birth, step - birth.Step, double.NaN, false));
        columns.Sort((a, b) => (b.Birth.Step, b.Birth.Iteration).CompareTo((a.Birth.Step, a.Birth.Iteration)));
        var (uncovered, _) = ReportedTriangle.Promise(report, run.Fields.Norm);
        return new BasisView
        {
            Step = step,
            Iteration = iteration,
            Rule = rule,
            Threshold = UpdateJudge.ThresholdOf(run),
            Source = "reported",
            Columns = columns,
            Kept = report.Columns.Length,
            Condition = condition?.Raw,
            ConditionUnit = condition?.UnitColumns,
            CoefficientError = condition?.UnitColumns * run.DeclaredNoise,
            Uncovered = double.IsNaN(uncovered) ? null : uncovered,
            AdvisedThreshold = AdvisedThreshold.Of(run, rule),
            DeclaredNoise = run.DeclaredNoise,
        };
    }

    private static double Share(SmallMatrix triangle, int column, FilterRule rule)
    {
        var pivot = Math.Abs(triangle[column, column]);
        double squares = 0, largest = 0;
        for (var i = 0; i <= column; i++) squares += triangle[i, column] * triangle[i, column];
        for (var i = 0; i < triangle.Columns; i++) largest = Math.Max(largest, Math.Abs(triangle[i, i]));
        var reference = rule == FilterRule.PivotRatio ? largest : Math.Sqrt(squares);
        return reference > 0 ? pivot / reference : 0;
    }

    private static ConditionNumber? ConditionOf(FilterOutcome outcome) => outcome.Kept.Length == 0 ? null : ConditionNumber.Of(outcome.Triangle());

    private static FilterRule Known(FilterRule? rule) => rule is FilterRule.OwnNorm or FilterRule.PivotRatio ? rule.Value : FilterRule.None;
}
