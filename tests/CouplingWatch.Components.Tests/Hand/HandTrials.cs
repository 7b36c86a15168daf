using CouplingWatch.Components.Feed;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Hand;

/// <summary>Rehearsals and races by hand.</summary>
public sealed class HandTrials : ITrialFeed
{
    public Func<IReadOnlyList<CouplingSettings>?, CancellationToken, Task<RehearsalView?>> Rehearse { get; set; } = (_, _) => Task.FromResult<RehearsalView?>(Trusted());
    public Func<RaceProposal, RaceOutcome> Start { get; set; } = _ => new("race-1", null);
    public List<IReadOnlyList<CouplingSettings>?> Rehearsed { get; } = [];
    public List<RaceProposal> Started { get; } = [];
    public List<string> Stopped { get; } = [];

    public Task<RehearsalView?> RehearseAsync(string run, IReadOnlyList<CouplingSettings>? candidates, IProgress<double>? progress = null, CancellationToken cancel = default)
    {
        Rehearsed.Add(candidates);
        return Rehearse(candidates, cancel);
    }

    public Task<RaceOutcome> StartRaceAsync(string run, RaceProposal proposal, CancellationToken cancel = default)
    {
        Started.Add(proposal);
        return Task.FromResult(Start(proposal));
    }

    public Task<string?> StopRaceAsync(string run, string race, string? reason = null, CancellationToken cancel = default)
    {
        Stopped.Add(race);
        return Task.FromResult<string?>(null);
    }

    /// <summary>A rehearsal whose calibration holds: 11.1 against 11.2 recorded.</summary>
    public static RehearsalView Trusted()
    {
        RehearsedCandidate[] candidates =
        [
            new(new() { HistorySteps = 8 }, 4.5, 4.2, 4.8, 0, 12), new(new() { HistorySteps = 4, PredictorOrder = 2 }, 4.6, 4.5, 4.7, 0, 12),
            new(new() { HistorySteps = 8, FilterRule = FilterRule.OwnNorm, FilterThreshold = 1e-2 }, 4.7, 4.7, 4.8, 0, 12), new(new() { HistorySteps = 2 }, 5.5, 5.5, 5.5, 0, 12),
            new(new() { HistorySteps = 8, FilterRule = FilterRule.PivotRatio, FilterThreshold = 1e-2 }, 12.6, 11.3, 14.1, 2, 12),
        ];
        return new RehearsalView
        {
            Calibration = new RehearsalCalibration(12, 11.2, 11.0, 0.018, true, null),
            Candidates = candidates,
            Proposal = candidates[0],
            Caveat = "Replayed from recorded passes: not valid once load, contact or time step differ from the recording.",
        };
    }

    /// <summary>A rehearsal that declines.</summary>
    public static RehearsalView Declined() => new()
    {
        Calibration = new RehearsalCalibration(12, 8.2, 13.9, 0.53, false, "the recording cannot be reproduced (replayed 13.9, recorded 8.2)"),
        Caveat = "",
    };

    /// <summary>A race in its third round: one challenger out by the guard, two still in.</summary>
    public static RaceView Running(string run = "leaf80-3")
    {
        var inUse = HandDetails.Settings(FilterRule.PivotRatio, 1e-2);
        RaceArm Arm(int arm, string name, CouplingSettings settings, string state, double? mean, string? why = null, int? round = null) => new()
        {
            Arm = arm,
            Name = name,
            Settings = settings,
            Origin = arm == 0 ? "in-use" : "rule",
            State = state,
            Mean = mean,
            Difference = arm == 0 ? null : mean - 11.1,
            OutWhy = why,
            OutRound = round,
            Rounds = state == "out" ? 1 : 2,
            StepsRun = 8,
        };
        var steps = new List<RaceStepView>();
        var step = 16;
        foreach (var (round, arm, level) in new[] { (1, 0, 11), (1, 1, 4), (1, 2, 17), (1, 3, 6), (2, 3, 5), (2, 0, 11), (2, 1, 4), (3, 1, 4) })
            for (var i = 0; i < 4; i++) steps.Add(new RaceStepView(step++, arm, level + (i + arm) % 3, true, arm == 2 && i > 0 ? "cost" : i == 0 ? "discarded" : "scored", round));
        return new RaceView
        {
            Id = "race-1",
            Run = run,
            State = RaceState.Running,
            By = "day shift",
            Seed = 4,
            Text = "round 3 of 5: own-norm 10⁻⁴ has its turn; 2 challengers are in",
            FirstStep = 16,
            RoundsPlanned = 5,
            ArmInForce = 1,
            ArmInTurn = 1,
            Arms =
            [
                Arm(0, "in use", inUse, "in", 11.1), Arm(1, "own-norm 10⁻⁴", inUse with { FilterRule = FilterRule.OwnNorm, FilterThreshold = 1e-4 }, "in", 4.2),
                Arm(2, "history 2", inUse with { HistorySteps = 2 }, "out", 17.3, "a step took 18 iterations, more than the guard allows (16.5)", 1), Arm(3, "pivot-ratio 10⁻⁷", inUse with { FilterThreshold = 1e-7 }, "in", 5.4),
            ],
            Rounds =
            [
                new RaceRound(1, [0, 1, 2, 3], [new(0, 11.0, 17, 19), new(1, 4.3, 21, 23), new(2, 17.3, 25, 27), new(3, 5.7, 29, 31)]),
                new RaceRound(2, [3, 0, 1], [new(3, 5.1, 33, 35), new(0, 11.2, 37, 39), new(1, 4.1, 41, 43)]), new RaceRound(3, [1, 3, 0], []),
            ],
            Steps = steps,
            Guard = new RaceGuard(16.5, 11, 11.1, 40, false),
            Cost = new RaceCost(-58.4, 0, -8600),
            Log = [new(16, "start", "4 arms, seed 4"), new(25, "out", "a step took 18 iterations, more than the guard allows (16.5)", 2), new(32, "round", "round 1 is complete")],
        };
    }

    /// <summary>The same race decided: the first challenger is published and watched.</summary>
    public static RaceView Decided(string run = "leaf80-3") => Running(run) with
    {
        State = RaceState.Watching,
        Text = "own-norm 10⁻⁴ has won and is watched for 10 steps",
        ArmInTurn = null,
        ArmInForce = 1,
        Arms = [.. Running(run).Arms.Select(a => a.Arm == 1 ? a with { State = "winner" } : a.Arm == 3 ? a with { State = "out", OutWhy = "not among the better half after round 3", OutRound = 3 } : a)],
        Verdict = new RaceVerdict("publish", "own-norm 10⁻⁴ takes 7.0 iterations a step fewer and was published with automatic fall-back", 1, new RaceEffect(1, -7.0, -7.3, -6.7, 0.9375, 5, 3), "watching"),
    };
}
