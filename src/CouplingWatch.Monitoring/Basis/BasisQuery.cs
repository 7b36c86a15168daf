using CouplingWatch.Monitoring.State;
using CouplingWatch.Numerics.Conditioning;
using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Basis;

/// <summary>Answers what the page asks of the basis: which columns, what each brings, what another rule or threshold would leave out. Changes nothing.</summary>
internal static class BasisQuery
{
    /// <summary>Thresholds of either rule shown beside the one in force and the one the declared noise suggests.</summary>
    private static readonly double[] Thresholds = [1e-8, 1e-6, 1e-4, 1e-2];

    /// <param name="step">The step in progress or the latest when null.</param>
    /// <param name="iteration">The latest of that step when null.</param>
    /// <param name="rule">In force when null.</param>
    /// <param name="threshold">In force when null; 0 ≤ ε &lt; 1.</param>
    /// <returns>Null when there is no basis there or its columns are no longer kept.</returns>
    public static BasisView? Ask(RunState run, int? step, int? iteration, FilterRule? rule, double? threshold)
    {
        if (threshold is { } e && !(e >= 0 && e < 1)) throw new ArgumentOutOfRangeException(nameof(threshold), e, "must be at least 0 and below 1");
        foreach (var group in run.Basis.Groups)
        {
            if (FromColumns(run, group, step, iteration, rule, threshold) is { } view) return view;
            if (rule is null && threshold is null && (step is null || step == run.Step.Step) && FromReport(run, group, iteration) is { } reported) return reported;
        }
        return null;
    }

    private static BasisView? FromColumns(RunState run, GroupBasis group, int? step, int? iteration, FilterRule? rule, double? threshold)
    {
        if (group.Columns is not { Count: > 0 } store || group.ForeignSteps > 0 || Where(group, step, iteration) is not { } at) return null;
        var inForce = run.Settings.FilterRule ?? FilterRule.None;
        var asked = rule ?? inForce;
        if (GroupBasis.RuleOf(asked) is not { } filter) return null;
        var order = store.Order(at.Ordinal, at.Iteration, run.HistorySteps, out _);
        if (order.Length == 0) return null;
        var epsilon = threshold ?? UpdateJudge.ThresholdOf(run);
        var outcome = ColumnFilter.Apply(store.Secants, order, filter, epsilon);
        var numbers = Numbers.Of(store.Secants, outcome, at);
        var columns = new BasisColumn[outcome.Columns.Length];
        for (var i = 0; i < columns.Length; i++)
        {
            var entry = outcome.Columns[i];
            var birth = store.Birth(entry.Index);
            columns[i] = new BasisColumn(birth, at.Step - birth.Step, double.IsFinite(entry.Share) ? entry.Share : 0, entry.Fate == ColumnFate.Kept);
        }
        return new BasisView
        {
            Step = at.Step,
            Iteration = at.Iteration,
            Group = group.Group,
            Rule = asked,
            Threshold = epsilon,
            Source = group.Sketched ? "sketch" : "vectors",
            Columns = columns,
            Kept = outcome.Kept.Length,
            Condition = numbers.Raw,
            ConditionUnit = numbers.Unit,
            CoefficientError = run.DeclaredNoise * numbers.Unit,
            Uncovered = numbers.Uncovered,
            AdvisedThreshold = AdvisedThreshold.Of(run, asked),
            DeclaredNoise = run.DeclaredNoise,
            WhatIf = WhatIfs(run, store, order, at),
        };
    }

    private static BasisView? FromReport(RunState run, GroupBasis group, int? iteration)
    {
        if (group.LatestReport is not { } report || (iteration is { } asked && asked != group.LatestReportIteration)) return null;
        var triangle = ReportedTriangle.Of(report);
        var condition = triangle is null ? default : ConditionNumber.Of(triangle);
        var columns = report.Columns.Select((b, i) => new BasisColumn(b, run.Step.Step - b.Step, Share(triangle, i), true))
            .Concat(report.Left.Select(b => new BasisColumn(b, run.Step.Step - b.Step, 0, false))).ToArray();
        var update = group.Updates.LastOrDefault(u => u.Iteration == group.LatestReportIteration);
        return new BasisView
        {
            Step = run.Step.Step,
            Iteration = group.LatestReportIteration,
            Group = group.Group,
            Rule = run.Settings.FilterRule ?? FilterRule.None,
            Threshold = UpdateJudge.ThresholdOf(run),
            Source = "reported",
            Columns = columns,
            Kept = report.Columns.Length,
            Condition = triangle is null ? null : Numbers.Shown(condition.Raw),
            ConditionUnit = triangle is null ? null : Numbers.Shown(condition.UnitColumns),
            CoefficientError = triangle is null ? null : run.DeclaredNoise * Numbers.Shown(condition.UnitColumns),
            Uncovered = update is { } u && double.IsFinite(u.Uncovered) ? u.Uncovered : null,
            AdvisedThreshold = AdvisedThreshold.Of(run, run.Settings.FilterRule ?? FilterRule.OwnNorm),
            DeclaredNoise = run.DeclaredNoise,
        };
    }

    /// <summary>New direction over the column's own norm, from the triangle.</summary>
    private static double Share(SmallMatrix? triangle, int column)
    {
        if (triangle is null) return 0;
        var squares = 0.0;
        for (var i = 0; i <= column; i++) squares += triangle[i, column] * triangle[i, column];
        return squares > 0 ? Math.Abs(triangle[column, column]) / Math.Sqrt(squares) : 0;
    }

    private static StoredIteration? Where(GroupBasis group, int? step, int? iteration)
    {
        for (var i = group.Vectors.Count - 1; i >= 0; i--)
        {
            var entry = group.Vectors[i];
            if ((step is null || entry.Step == step) && (iteration is null || entry.Iteration == iteration)) return entry;
            if (step is null && iteration is not null && entry.Ordinal != group.Vectors.Newest!.Ordinal) return null;
        }
        return null;
    }

    private static IReadOnlyList<WhatIf> WhatIfs(RunState run, ColumnStore store, int[] order, StoredIteration at)
    {
        List<WhatIf> list = [];
        int[] kept = [];
        Numbers numbers = default;
        var inForce = (Rule: run.Settings.FilterRule, Threshold: UpdateJudge.ThresholdOf(run));
        foreach (var rule in (ReadOnlySpan<FilterRule>)[FilterRule.OwnNorm, FilterRule.PivotRatio])
        {
            SortedSet<double> thresholds = [.. Thresholds, AdvisedThreshold.Of(run, rule)];
            if (rule == inForce.Rule) thresholds.Add(inForce.Threshold);
            foreach (var threshold in thresholds)
            {
                var outcome = ColumnFilter.Apply(store.Secants, order, GroupBasis.RuleOf(rule)!.Value, threshold);
                if (list.Count == 0 || !outcome.Kept.SequenceEqual(kept))
                {
                    kept = outcome.Kept.ToArray();
                    numbers = Numbers.Of(store.Secants, outcome, at, unitOnly: true);
                }
                list.Add(new WhatIf(rule, threshold, (rule, threshold) == inForce, outcome.Kept.Length, numbers.Unit, numbers.Uncovered));
            }
        }
        return list;
    }

    /// <summary>Condition and uncovered share of a filtered basis; null where there is no number.</summary>
    private readonly record struct Numbers(double? Raw, double? Unit, double? Uncovered)
    {
        public static Numbers Of(SecantBasis secants, FilterOutcome outcome, StoredIteration at, bool unitOnly = false)
        {
            double? uncovered = null;
            if (at.Finite)
            {
                var onDirections = new double[secants.Rank];
                secants.Project(at.Residual, onDirections, out var outside);
                uncovered = SecantFit.Solve(outcome, onDirections, outside).UncoveredShare;
            }
            if (outcome.Kept.Length == 0) return new Numbers(null, null, uncovered);
            if (unitOnly) return new Numbers(null, Shown(ConditionNumber.OfUnitColumns(outcome.Triangle())), uncovered);
            var condition = ConditionNumber.Of(outcome.Triangle());
            return new Numbers(Shown(condition.Raw), Shown(condition.UnitColumns), uncovered);
        }

        public static double? Shown(double condition) => double.IsFinite(condition) ? condition : null;
    }
}
