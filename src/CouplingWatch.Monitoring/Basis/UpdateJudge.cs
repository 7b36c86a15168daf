using CouplingWatch.Monitoring.State;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Basis;

/// <summary>What an update rests on: from the vectors where there are any (with the columns the code says it used, else with its rule), else from what the code reports.</summary>
internal static class UpdateJudge
{
    /// <summary>Null when there is nothing to go by: no columns and no report.</summary>
    public static UpdateFacts? Judge(GroupBasis group, RunState run, BasisReport? report, double norm, bool relaxed, double surrogate)
    {
        var step = run.Step;
        var made = !relaxed && (report is not null ? report.Columns.Length > 0 : run.UsesSecants);
        if (group.Columns is { Count: > 0 } store && group.Vectors.Newest is { Finite: true } vector && vector.Ordinal == step.Ordinal && vector.Iteration == step.Iteration)
        {
            var facts = FromVectors(group, store, vector, run, report, norm, made, surrogate);
            if (facts is not null) return facts;
        }
        return report is null ? null : FromReport(run, report, norm, made, surrogate);
    }

    private static UpdateFacts? FromVectors(GroupBasis group, ColumnStore store, StoredIteration vector, RunState run, BasisReport? report, double norm, bool made, double surrogate)
    {
        var step = run.Step;
        var order = store.Order(step.Ordinal, step.Iteration, run.HistorySteps, out var live);
        FilterOutcome kept;
        ColumnBirth[] left = [];
        if (report is not null)
        {
            var used = new int[report.Columns.Length];
            for (var i = 0; i < used.Length; i++)
            {
                used[i] = store.Find(report.Columns[i]);
                if (used[i] < 0 || Array.IndexOf(used, used[i], 0, i) >= 0) return null;
            }
            left = report.Left;
            kept = ColumnFilter.Apply(store.Secants, used, SecantFilter.None, 0);
        }
        else
        {
            if (group.ForeignSteps > 0 || GroupBasis.RuleOf(run.Settings.FilterRule ?? FilterRule.None) is not { } rule) return null;
            kept = ColumnFilter.Apply(store.Secants, order, rule, ThresholdOf(run));
            left = BirthsOf(store, kept.Left);
        }
        var births = BirthsOf(store, kept.Kept);
        var liveKept = CountLive(births, step.Step);
        Span<double> onDirections = store.Secants.Rank <= 256 ? stackalloc double[store.Secants.Rank] : new double[store.Secants.Rank];
        store.Secants.Project(vector.Residual, onDirections, out var outside);
        var fit = SecantFit.Solve(kept, onDirections, outside, liveKept);
        var liveLeft = CountLive(left, step.Step);
        return new UpdateFacts
        {
            Iteration = step.Iteration,
            Source = group.Sketched ? "sketch" : "vectors",
            Norm = norm,
            Rule = run.Settings.FilterRule ?? FilterRule.None,
            Threshold = ThresholdOf(run),
            All = report is null ? order.Length : births.Length + left.Length,
            Kept = births.Length,
            Left = left.Length,
            Live = report is null ? live : Math.Max(live, liveKept + liveLeft),
            LiveLeft = liveLeft,
            HistoryKept = births.Length - liveKept,
            NewestLiveLeft = NewestLeft(births, left, step, report is not null),
            Uncovered = fit.UncoveredShare,
            LiveShare = fit.LiveShare,
            HistoryShare = fit.HistoryShare,
            AlphaNorm = fit.AlphaNorm,
            Surrogate = surrogate,
            Made = made,
        };
    }

    private static UpdateFacts FromReport(RunState run, BasisReport report, double norm, bool made, double surrogate)
    {
        var step = run.Step;
        var liveKept = CountLive(report.Columns, step.Step);
        var liveLeft = CountLive(report.Left, step.Step);
        var (uncovered, alpha) = ReportedTriangle.Promise(report, norm);
        return new UpdateFacts
        {
            Iteration = step.Iteration,
            Source = "reported",
            Norm = norm,
            Rule = run.Settings.FilterRule ?? FilterRule.None,
            Threshold = ThresholdOf(run),
            All = report.Columns.Length + report.Left.Length,
            Kept = report.Columns.Length,
            Left = report.Left.Length,
            Live = liveKept + liveLeft,
            LiveLeft = liveLeft,
            HistoryKept = report.Columns.Length - liveKept,
            NewestLiveLeft = NewestLeft(report.Columns, report.Left, step, true),
            Uncovered = uncovered,
            AlphaNorm = alpha,
            Surrogate = surrogate,
            Made = made,
        };
    }

    /// <summary>ε in force; 0 where none is declared.</summary>
    public static double ThresholdOf(RunState run) => run.Settings.FilterThreshold is { } e && e >= 0 && e < 1 ? e : 0;

    /// <summary>The column [s, k − 1] is left out: named so, or (where the code names what it uses) not among those in use.</summary>
    private static bool NewestLeft(ColumnBirth[] kept, ColumnBirth[] left, StepState step, bool reported)
    {
        if (step.Iteration < 1) return false;
        foreach (var birth in left)
            if (birth.Step == step.Step && birth.Iteration == step.Iteration - 1) return true;
        if (!reported || kept.Length == 0) return false;
        foreach (var birth in kept)
            if (birth.Step == step.Step && birth.Iteration == step.Iteration - 1) return false;
        return true;
    }

    private static int CountLive(ColumnBirth[] births, int step)
    {
        var n = 0;
        foreach (var birth in births)
            if (birth.Step == step) n++;
        return n;
    }

    private static ColumnBirth[] BirthsOf(ColumnStore store, ReadOnlySpan<int> indices)
    {
        var births = new ColumnBirth[indices.Length];
        for (var i = 0; i < births.Length; i++) births[i] = store.Birth(indices[i]);
        return births;
    }
}
