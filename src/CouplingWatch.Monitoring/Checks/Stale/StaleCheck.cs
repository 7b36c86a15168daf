using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Numerics.Sequences;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Stale;

/// <summary>Columns reused from earlier steps mislead the first update, and it costs iterations, step after step. Level 2; level 0 sees it by the first increment.</summary>
internal sealed class StaleCheck(StaleOptions options) : ICheck
{
    private const int Increments = 20;
    private const int Counts = 30;

    private readonly Window increments = new(Increments);
    private readonly Window earlier = new(Counts);
    private ulong recent;
    private bool suspected;
    private bool noted;
    private double miss;

    public string Id => CheckIds.Stale;

    public void Restart(RunState run, RestartCause cause)
    {
        if (cause == RestartCause.TimeStep) return;
        increments.Clear();
        earlier.Clear();
        recent = 0;
    }

    public void Iteration(RunState run, List<Finding> findings)
    {
        var step = run.Step;
        if (step.Last == 0)
        {
            suspected = noted = false;
            miss = double.NaN;
        }
        if (run.Steady || step.HasNotFinite || step.Incomplete) return;
        if (step.Last == 1) suspected = Promised(run) || Increment(run);
        if (!suspected || step.Done || run.ConvergedCounts.Count < options.LeastEarlier) return;
        var median = Robust.Median(run.ConvergedCounts, RunState.LatestSteps);
        if (step.Last + 1 < options.IterationsMore + Usual(median)) return;
        var stale = System.Numerics.BitOperations.PopCount(recent & ((1UL << (options.Within - 1)) - 1)) + 1;
        if (stale >= options.Steps) findings.Add(Stale(run, median, stale));
        else if (!noted) run.Notes.Add($"step {step.Step} looks stale: its first update missed, and it takes {step.Last + 1} iterations and more where {Say.Number(median)} are usual");
        noted = true;
    }

    public void StepClosed(RunState run, in ClosedStep step, List<Finding> findings)
    {
        recent = (recent << 1) | (noted ? 1UL : 0);
        if (step.Converged && !run.Learning.Holds) earlier.Add(step.Iterations);
        if (!double.IsNaN(run.Step.FirstIncrement) && step.Complete) increments.Add(run.Step.FirstIncrement);
    }

    public void Advise(RunState run, Alert alert, List<Move> moves)
    {
        if (alert.Check != Id) return;
        if (Moves.DropHistory(run) is { } drop) moves.Add(drop);
        if (Moves.HistoryDown(run) is { } fewer) moves.Add(fewer);
        if (run.StepsCapped > 0 && Moves.TimeStepDown(run) is { } timeStep) moves.Add(timeStep);
    }

    public NotJudged? Lacks(RunState run) => null;

    /// <summary>
    /// What a step usually takes. Where dear steps came and went before the latest five (a strongly varying load), the dear ones are usual too:
    /// then it is what four in five of those earlier steps stayed within.
    /// </summary>
    private double Usual(double median)
    {
        if (earlier.Count < options.LeastEarlier + options.Within) return median;
        Span<double> counts = stackalloc double[Counts];
        var n = 0;
        var dear = 0;
        for (var i = options.Within; i < earlier.Count; i++)
        {
            counts[n++] = earlier[i];
            if (earlier[i] >= median + options.IterationsMore) dear++;
        }
        return dear > options.DearShare * n ? Math.Max(median, Quantile.Of(counts[..n], 1 - options.DearShare)) : median;
    }

    /// <summary>The first update rested on reused columns, promised much and missed by decades.</summary>
    private bool Promised(RunState run)
    {
        foreach (var group in run.Basis.Groups)
        {
            if (FirstUpdate.Missed(group, options.PromisedBelow, options.LeftAbove) is not { } missed) continue;
            run.Misled |= missed > options.MisledDecades;
            if (!(missed > options.MissDecades)) continue;
            miss = missed;
            return true;
        }
        return false;
    }

    /// <summary>The first increment of z is far above those of earlier steps.</summary>
    private bool Increment(RunState run)
    {
        if (run.Learning.Holds || increments.Count < options.LeastEarlier || !BorrowsOrUnknown(run)) return false;
        var g = run.Step.FirstIncrement;
        var median = Robust.Median(increments, Increments);
        var spread = options.Deviations * Quantile.MadToSigma * Robust.Deviation(increments, Increments);
        return g > options.IncrementAbove && g > median + Math.Max(options.LeastAboveMedian, spread);
    }

    private static bool BorrowsOrUnknown(RunState run) =>
        run.Settings.Method is not (CouplingMethod.Fixed or CouplingMethod.Aitken) && run.Settings.HistorySteps is not 0;

    private Finding Stale(RunState run, double median, int steps)
    {
        var evidence = new JsonObject
        {
            ["staleSteps"] = steps,
            ["within"] = options.Within,
            ["iterations"] = run.Step.Last + 1,
            ["usualIterations"] = median,
            ["firstIncrement"] = run.Step.FirstIncrement,
        };
        if (double.IsFinite(miss)) evidence["missDecades"] = miss;
        var why = double.IsFinite(miss) ? $"missed what it promised by {Say.Number(miss)} decades" : "made the residual fall far less than it used to";
        return new Finding(Id, Severity.Warning,
            $"The first update, made with columns of earlier steps, {why}; this is the {Ordinal(steps)} such step within {options.Within}, and steps take {run.Step.Last + 1} iterations and more where {Say.Number(median)} were usual.",
            evidence);
    }

    private static string Ordinal(int n) => n switch { 1 => "first", 2 => "second", 3 => "third", 4 => "fourth", 5 => "fifth", _ => $"{n}th" };
}
