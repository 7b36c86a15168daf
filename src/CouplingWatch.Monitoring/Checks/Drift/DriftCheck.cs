using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Drift;

/// <summary>When the iterations a step have grown for good. The upper cumulative sum after Page, Biometrika 41 (1954) 100–115, DOI 10.1093/biomet/41.1-2.100.</summary>
public sealed record DriftOptions
{
    public const int DefaultSkippedSteps = 4;
    public const int DefaultBaselineSteps = 10;
    public const double DefaultLeastDeviation = 0.5;
    public const double DefaultAllowance = 0.5;
    public const double DefaultLimit = 8;
    public const double DefaultLeastRatio = 1.4;
    public const double DefaultLeastIncrease = 2;

    /// <summary>Converged steps skipped first; 0…1000.</summary>
    public int SkippedSteps { get; init; } = DefaultSkippedSteps;
    /// <summary>Steps of the baseline; 2…50.</summary>
    public int BaselineSteps { get; init; } = DefaultBaselineSteps;
    /// <summary>Smallest standard deviation used, iterations; above 0.</summary>
    public double LeastDeviation { get; init; } = DefaultLeastDeviation;
    /// <summary>Allowance of the cumulative sum, in deviations; 0…5.</summary>
    public double Allowance { get; init; } = DefaultAllowance;
    /// <summary>Decision limit, in deviations; above 0.</summary>
    public double Limit { get; init; } = DefaultLimit;
    /// <summary>Median of the latest ten over the baseline's; 1…100.</summary>
    public double LeastRatio { get; init; } = DefaultLeastRatio;
    /// <summary>… and above it by this many iterations; 0…100.</summary>
    public double LeastIncrease { get; init; } = DefaultLeastIncrease;

    internal void Validate(OptionFaults faults)
    {
        faults.Range("Drift.SkippedSteps", SkippedSteps, 0, 1000);
        faults.Range("Drift.BaselineSteps", BaselineSteps, 2, 50);
        faults.Range("Drift.LeastDeviation", LeastDeviation, 0.01, 100);
        faults.Range("Drift.Allowance", Allowance, 0, 5);
        faults.Range("Drift.Limit", Limit, 0.1, 1000);
        faults.Range("Drift.LeastRatio", LeastRatio, 1, 100);
        faults.Range("Drift.LeastIncrease", LeastIncrease, 0, 100);
    }
}

/// <summary>Steps take clearly more iterations than they did at first, and go on doing so. Level 0.</summary>
internal sealed class DriftCheck(DriftOptions options) : ICheck
{
    private const int Latest = 10;

    private readonly Window baseline = new(options.BaselineSteps);
    private readonly Window latest = new(Latest);
    private int skipped;
    private double mean;
    private double deviation;
    private double median;
    private double sum;
    private double? timeStep;
    private int otherTimeSteps;

    public string Id => CheckIds.Drift;

    public void Restart(RunState run, RestartCause cause)
    {
        if (cause == RestartCause.TimeStep) return;
        baseline.Clear();
        latest.Clear();
        skipped = 0;
        sum = 0;
        otherTimeSteps = 0;
    }

    public void StepClosed(RunState run, in ClosedStep step, List<Finding> findings)
    {
        if (!step.Converged || run.Steady || !step.Complete || OtherTimeStep(run, step)) return;
        if (skipped < options.SkippedSteps)
        {
            skipped++;
            return;
        }
        if (!baseline.IsFull)
        {
            baseline.Add(step.Iterations);
            if (!baseline.IsFull) return;
            SetBaseline();
            timeStep = step.TimeStep ?? run.TimeStep;
            return;
        }
        latest.Add(step.Iterations);
        sum = Math.Max(0, sum + (step.Iterations - mean) / deviation - options.Allowance);
        if (!(sum > options.Limit) || !latest.IsFull || run.Learning.Holds) return;
        var now = Robust.Median(latest, Latest);
        if (now < Math.Max(options.LeastRatio * median, median + options.LeastIncrease) || !Stays()) return;
        findings.Add(Dearer(now));
    }

    /// <summary>Steps of a time step far from the baseline's do not compare with it; when they stay, a new baseline is due.</summary>
    private bool OtherTimeStep(RunState run, in ClosedStep step)
    {
        if (!baseline.IsFull || (step.TimeStep ?? run.TimeStep) is not { } now) return false;
        if (timeStep is not { } reference || now / reference is > 0.5 and < 2)
        {
            otherTimeSteps = 0;
            return false;
        }
        if (++otherTimeSteps >= Latest) Restart(run, RestartCause.Settings);
        return true;
    }

    /// <summary>Periodic physics comes back to its cheap steps; a drift does not: at most a tenth of the latest steps are as cheap as the baseline.</summary>
    private bool Stays()
    {
        var cheap = 0;
        for (var i = 0; i < latest.Count; i++)
            if (latest[i] <= median) cheap++;
        return cheap <= Latest / 10;
    }

    private void SetBaseline()
    {
        var n = baseline.Count;
        mean = 0;
        for (var i = 0; i < n; i++) mean += baseline[i] / n;
        var squares = 0.0;
        for (var i = 0; i < n; i++) squares += (baseline[i] - mean) * (baseline[i] - mean);
        deviation = Math.Max(options.LeastDeviation, Math.Sqrt(squares / (n - 1)));
        median = Robust.Median(baseline, n);
    }

    private Finding Dearer(double now) => new(Id, Severity.Note,
        $"Steps take {Say.Number(now)} iterations now, {Say.Number(median)} at first: something in the problem has changed.",
        new JsonObject { ["medianNow"] = now, ["medianBaseline"] = median, ["meanBaseline"] = mean, ["deviationBaseline"] = deviation, ["cumulativeSum"] = sum });
}
