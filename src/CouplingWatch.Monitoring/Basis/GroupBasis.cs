using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Vectors;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Basis;

/// <summary>The secant basis of one group of fields: its columns where vectors are sent, and what each update of the step in progress rests on.</summary>
internal sealed class GroupBasis(string? group)
{
    /// <summary>Updates of the step in progress that are kept.</summary>
    public const int UpdatesKept = 64;

    private readonly List<UpdateFacts> updates = [];
    private double[] difference = [];

    /// <summary>Null for the only group of a run.</summary>
    public string? Group { get; } = group;

    /// <summary>Null until vectors or sketches came.</summary>
    public ColumnStore? Columns { get; private set; }

    public VectorRing Vectors { get; } = new();

    /// <summary>The updates of the step in progress, oldest first.</summary>
    public IReadOnlyList<UpdateFacts> Updates => updates;

    public UpdateFacts? Latest => updates.Count == 0 ? null : updates[^1];

    public bool Sketched { get; private set; }

    /// <summary>What the code reported last in the step in progress, and at which iteration.</summary>
    public BasisReport? LatestReport { get; private set; }

    public int LatestReportIteration { get; private set; }

    /// <summary>A triangle came with a report.</summary>
    public bool TriangleSent { get; private set; }

    /// <summary>Columns are in use that were born before what was sent here (a kept or mapped basis): own filtering cannot be trusted for so many steps.</summary>
    public int ForeignSteps { get; set; }

    /// <summary>Norm of the group's residual in the step in progress: first and lowest.</summary>
    public double FirstNorm { get; private set; } = double.NaN;

    public double LowestNorm { get; private set; } = double.NaN;

    /// <summary>r_k·r_{k−1}, ‖r_k‖² and ‖r_{k−1}‖² of the latest iteration; 0 without vectors of both.</summary>
    public double Dot { get; private set; }

    public double Square { get; private set; }

    public double SquareBefore { get; private set; }

    public void BeginStep()
    {
        updates.Clear();
        LatestReport = null;
        FirstNorm = LowestNorm = double.NaN;
    }

    public void BeginIteration() => Dot = Square = SquareBefore = 0;

    /// <summary>Takes in the vectors of an iteration and forms the column it completes.</summary>
    /// <param name="weights">Weight and length of each stretch of the stacked vector; null when the vectors are taken as they are.</param>
    public void Take(RunState run, double[] residual, double[] output, bool sketched, IReadOnlyList<(double Weight, int Length)>? weights)
    {
        var step = run.Step;
        if (Columns is not null && (Columns.Rows != residual.Length || Sketched != sketched)) Forget();
        Sketched = sketched;
        Columns ??= new ColumnStore(residual.Length);
        var before = Vectors.Newest is { } newest && newest.Ordinal == step.Ordinal && newest.Iteration == step.Iteration - 1 ? newest : null;
        var now = Vectors.Add(step.Ordinal, step.Step, step.Iteration, residual.Length);
        Weigh(residual, now.Residual, weights);
        Weigh(output, now.Output, weights);
        var norm = LongVector.Norm(now.Residual);
        now.Finite = double.IsFinite(norm) && double.IsFinite(LongVector.Norm(now.Output));
        if (before is not { Finite: true } || !now.Finite) return;
        var normBefore = LongVector.Norm(before.Residual);
        (Dot, Square, SquareBefore) = (LongVector.Dot(now.Residual, before.Residual), norm * norm, normBefore * normBefore);
        if (step.Incomplete) return;
        if (difference.Length != residual.Length) difference = new double[residual.Length];
        for (var i = 0; i < difference.Length; i++) difference[i] = now.Residual[i] - before.Residual[i];
        Columns.Append(difference, new ColumnBirth(step.Step, step.Iteration - 1, step.Attempt), step.Ordinal);
    }

    /// <summary>Notes the norm of this iteration and judges the update made after it.</summary>
    public void Judge(RunState run, BasisReport? report, double norm, bool relaxed, double surrogate)
    {
        if (Latest is { } before && before.Iteration == run.Step.Iteration - 1 && before.Norm > 0) before.Came = norm / before.Norm;
        if (double.IsNaN(FirstNorm)) FirstNorm = norm;
        LowestNorm = double.IsNaN(LowestNorm) ? norm : Math.Min(LowestNorm, norm);
        if (report is not null) (LatestReport, LatestReportIteration) = (report, run.Step.Iteration);
        TriangleSent |= report?.R is not null;
        var facts = UpdateJudge.Judge(this, run, report, norm, relaxed, surrogate);
        if (facts is null) return;
        if (updates.Count == UpdatesKept) updates.RemoveAt(0);
        updates.Add(facts);
    }

    public void StepClosed(RunState run, in ClosedStep step)
    {
        if (step.Outcome == StepOutcome.Rejected)
        {
            Columns?.Drop(step.Ordinal);
            Vectors.Drop(step.Ordinal);
            return;
        }
        Columns?.Accept(step.Step, step.Ordinal, step.Outcome != StepOutcome.Failed && step.Complete);
        Columns?.Trim(run.HistorySteps);
        if (ForeignSteps > 0) ForeignSteps--;
    }

    /// <summary>Old columns no longer compare.</summary>
    public void Forget()
    {
        Columns = null;
        Vectors.Clear();
    }

    public void DropHistory() => Columns?.Clear();

    /// <summary>The rule and threshold in force, as the filter takes them; null when the code's rule is not one of ours.</summary>
    public static SecantFilter? RuleOf(FilterRule? rule) => rule switch
    {
        FilterRule.PivotRatio => SecantFilter.PivotRatio,
        FilterRule.OwnNorm => SecantFilter.OwnNorm,
        FilterRule.None => SecantFilter.None,
        _ => null,
    };

    private static void Weigh(double[] source, double[] target, IReadOnlyList<(double Weight, int Length)>? weights)
    {
        source.CopyTo(target, 0);
        if (weights is null) return;
        var at = 0;
        foreach (var (weight, length) in weights)
        {
            if (weight != 1)
                for (var i = at; i < at + length; i++) target[i] *= weight;
            at += length;
        }
    }
}
