using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Polluted;

/// <summary>When promises of the secant update count as broken.</summary>
public sealed record PollutedOptions
{
    public const double DefaultPromisedBelow = 0.3;
    public const double DefaultKeptBelow = 0.7;
    public const int DefaultBroken = 4;
    public const double DefaultFellDecades = 1;
    public const int DefaultSoundSteps = 5;
    public const int DefaultMisledSteps = 2;

    /// <summary>An update promises something when it leaves less than this share of the residual uncovered; 0…1.</summary>
    public double PromisedBelow { get; init; } = DefaultPromisedBelow;
    /// <summary>The promise is broken when more than this share of the residual is left; 0…10.</summary>
    public double KeptBelow { get; init; } = DefaultKeptBelow;
    /// <summary>Broken ones among the last five of the step; 1…5.</summary>
    public int Broken { get; init; } = DefaultBroken;
    /// <summary>A step whose residual fell by this many decades already is not polluted; 0…20.</summary>
    public double FellDecades { get; init; } = DefaultFellDecades;

    /// <summary>Sound steps before from which on a misled first update speaks of a changed problem; 1…1000.</summary>
    public int SoundSteps { get; init; } = DefaultSoundSteps;
    /// <summary>… unless so many of the latest five steps were misled already; 0…6.</summary>
    public int MisledSteps { get; init; } = DefaultMisledSteps;

    internal void Validate(OptionFaults faults)
    {
        faults.Range("Polluted.PromisedBelow", PromisedBelow, 0, 1);
        faults.Range("Polluted.KeptBelow", KeptBelow, 0, 10);
        faults.Range("Polluted.Broken", Broken, 1, PollutedCheck.Latest);
        faults.Range("Polluted.FellDecades", FellDecades, 0, 20);
        faults.Range("Polluted.SoundSteps", SoundSteps, 1, 1000);
        faults.Range("Polluted.MisledSteps", MisledSteps, 0, 6);
    }
}

/// <summary>The secants claim to remove nearly all of the residual, and it does not go: they hold noise. Level 2.</summary>
internal sealed class PollutedCheck(PollutedOptions options) : ICheck
{
    internal const int Latest = 5;

    public string Id => CheckIds.Polluted;

    public void Iteration(RunState run, List<Finding> findings)
    {
        if (run.Step.Done || run.Step.HasNotFinite || Changed(run)) return;
        foreach (var group in run.Basis.Groups)
        {
            if (!Holds(group, run.Step.Iteration, out var broken)) continue;
            findings.Add(Polluted(group, broken));
            return;
        }
    }

    public void Advise(RunState run, Alert alert, List<Move> moves)
    {
        if (alert.Check != Id) return;
        if (run.Settings.FilterRule == FilterRule.None && Moves.ToOwnNorm(run) is { } rule) moves.Add(rule);
        if (Moves.Threshold(run, up: true) is { } threshold) moves.Add(threshold);
        if (Moves.DropHistory(run) is { } drop) moves.Add(drop);
        if (moves.Count == 0 || (moves.Count == 1 && moves[0].Setting == "dropHistory")) moves.Insert(0, Moves.SolverNoiseDown(run, 1));
    }

    public NotJudged? Lacks(RunState run) => BasisLack.Of(run, Id);

    /// <summary>
    /// After sound steps, a step whose very first update is misled by their columns meets another problem, not noise: noise is brought by steps that ran into it.
    /// Such a step is the business of <c>stale</c>; when it goes on for more than two steps, both may speak.
    /// </summary>
    private bool Changed(RunState run) => run.Misled && run.SoundSteps >= options.SoundSteps && run.MisledSteps < options.MisledSteps;

    /// <summary>The promises of the iterations before the latest one are the ones that can be told.</summary>
    private bool Holds(GroupBasis group, int iteration, out int broken)
    {
        broken = 0;
        var told = 0;
        for (var i = group.Updates.Count - 1; i >= 0 && told < Latest; i--)
        {
            var update = group.Updates[i];
            if (update.Iteration >= iteration) continue;
            if (update.Iteration < iteration - Latest) break;
            told++;
            if (update.Broken(options.PromisedBelow, options.KeptBelow)) broken++;
        }
        return told >= options.Broken && broken >= options.Broken && Decades.Log(group.FirstNorm) - Decades.Log(group.LowestNorm) < options.FellDecades;
    }

    private Finding Polluted(GroupBasis group, int broken)
    {
        var last = group.Updates[^1].Came is double.NaN && group.Updates.Count > 1 ? group.Updates[^2] : group.Updates[^1];
        var evidence = new JsonObject
        {
            ["brokenPromises"] = broken,
            ["ofLatest"] = Latest,
            ["uncovered"] = last.Uncovered,
            ["reduction"] = Finite(last.Came),
            ["kept"] = last.Kept,
            ["left"] = last.Left,
            ["threshold"] = last.Threshold,
            ["alphaNorm"] = Finite(last.AlphaNorm),
        };
        if (group.Group is not null) evidence["group"] = group.Group;
        return new Finding(Id, Severity.Warning,
            $"The {Say.Count(last.Kept, "column", "columns")} in use claim to remove {Say.Number(100 * (1 - last.Uncovered))} % of the residual, but {broken} of the last {Latest} updates left more than {Say.Number(100 * options.KeptBelow)} % of it: the columns hold noise that threshold {Say.Power(last.Threshold)} lets in.",
            evidence);
    }

    private static double? Finite(double value) => double.IsFinite(value) ? value : null;
}
