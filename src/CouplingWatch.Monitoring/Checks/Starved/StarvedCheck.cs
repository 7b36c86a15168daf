using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Starved;

/// <summary>When the filter leaves out too much.</summary>
public sealed record StarvedOptions
{
    public const int DefaultUpdates = 3;
    public const int DefaultFirstIteration = 5;
    public const double DefaultLiveShare = 0.4;
    public const double DefaultTimesAdvised = 10;
    public const double DefaultThresholdUndeclared = 0.1;

    /// <summary>Updates among the last five of the step; 1…5.</summary>
    public int Updates { get; init; } = DefaultUpdates;
    /// <summary>Under own-norm: earliest iteration; 1…1000.</summary>
    public int FirstIteration { get; init; } = DefaultFirstIteration;
    /// <summary>Under own-norm: share of the live columns left out; above 0 and at most 1.</summary>
    public double LiveShare { get; init; } = DefaultLiveShare;
    /// <summary>… with a threshold more than this many times the advised one; 1…1e6.</summary>
    public double TimesAdvised { get; init; } = DefaultTimesAdvised;
    /// <summary>… or, without declared noise, above this threshold; 0…1.</summary>
    public double ThresholdUndeclared { get; init; } = DefaultThresholdUndeclared;

    internal void Validate(OptionFaults faults)
    {
        faults.Range("Starved.Updates", Updates, 1, StarvedCheck.Latest);
        faults.Range("Starved.FirstIteration", FirstIteration, 1, 1000);
        faults.Range("Starved.LiveShare", LiveShare, 0.001, 1);
        faults.Range("Starved.TimesAdvised", TimesAdvised, 1, 1e6);
        faults.Range("Starved.ThresholdUndeclared", ThresholdUndeclared, 0, 1);
    }
}

/// <summary>The filter leaves out the columns the step has just paid for, so each iteration learns nothing. Level 2.</summary>
internal sealed class StarvedCheck(StarvedOptions options) : ICheck
{
    internal const int Latest = 5;

    public string Id => CheckIds.Starved;

    public void Iteration(RunState run, List<Finding> findings)
    {
        if (run.Step.Done || run.Step.HasNotFinite) return;
        foreach (var group in run.Basis.Groups)
        {
            if (group.Latest is not { } latest || latest.Iteration != run.Step.Iteration || !latest.Made) continue;
            var newest = Count(group, u => u.NewestLiveLeft);
            var many = TooHigh(run, latest) ? Count(group, u => u.Iteration >= options.FirstIteration && u.Live > 0 && u.LiveLeft >= options.LiveShare * u.Live) : 0;
            if (newest < options.Updates && many < options.Updates) continue;
            findings.Add(Starved(group, latest, newest >= options.Updates ? newest : many, newest >= options.Updates));
            return;
        }
    }

    public void Advise(RunState run, Alert alert, List<Move> moves)
    {
        if (alert.Check != Id) return;
        if (Moves.Threshold(run, up: false) is { } threshold) moves.Add(threshold);
        if (run.Settings.FilterRule == FilterRule.PivotRatio && Moves.ToOwnNorm(run) is { } rule) moves.Add(rule);
    }

    public NotJudged? Lacks(RunState run) => BasisLack.Of(run, Id);

    private bool TooHigh(RunState run, UpdateFacts update) => update.Rule == FilterRule.OwnNorm
        && (run.DeclaredNoise is null ? update.Threshold > options.ThresholdUndeclared : update.Threshold > options.TimesAdvised * AdvisedThreshold.Of(run, FilterRule.OwnNorm));

    private static int Count(GroupBasis group, Func<UpdateFacts, bool> holds)
    {
        var n = 0;
        for (var i = Math.Max(0, group.Updates.Count - Latest); i < group.Updates.Count; i++)
            if (holds(group.Updates[i])) n++;
        return n;
    }

    private Finding Starved(GroupBasis group, UpdateFacts update, int times, bool newest)
    {
        var evidence = new JsonObject
        {
            ["updates"] = times,
            ["ofLatest"] = Latest,
            ["kept"] = update.Kept,
            ["left"] = update.Left,
            ["live"] = update.Live,
            ["liveLeft"] = update.LiveLeft,
            ["rule"] = Say.Rule(update.Rule),
            ["threshold"] = update.Threshold,
        };
        if (group.Group is not null) evidence["group"] = group.Group;
        var what = newest ? "the column of the iteration just paid for" : $"{update.LiveLeft} of the {update.Live} columns of this step";
        return new Finding(Id, Severity.Warning,
            $"The filter ({Say.Rule(update.Rule)}, {Say.Power(update.Threshold)}) left out {what} in {times} of the last {Latest} updates; {update.Kept} of {update.All} columns are in use.",
            evidence);
    }
}
