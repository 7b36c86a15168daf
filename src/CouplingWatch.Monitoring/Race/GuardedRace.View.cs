using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Race;

/// <summary>The race as pages and outside clients see it.</summary>
public sealed partial class GuardedRace
{
    /// <summary>A snapshot; cost O(steps of the race).</summary>
    public RaceView View() => new()
    {
        Id = setup.Id,
        Run = setup.Run,
        State = State,
        By = setup.By,
        StartedAt = setup.StartedAt,
        Reason = setup.Reason,
        Seed = setup.Seed,
        ScoreBy = setup.ScoreBy,
        Text = Sentence(),
        FirstStep = steps.Count == 0 ? null : steps[0].Step.Step,
        LastStep = steps.Count == 0 ? null : steps[^1].Step.Step,
        StepsMissing = State == RaceState.Waiting ? options.StepsBefore - before.Count : 0,
        RoundsPlanned = options.Rounds,
        ArmInForce = inForce,
        ArmInTurn = State == RaceState.Running ? block.Arm : State == RaceState.Watching ? Verdict?.Winner : null,
        Arms = [.. arms.Select(Arm)],
        Rounds = [.. orders.Select((order, i) => new RaceRound(i + 1, order, [.. blocks.Where(b => b.Round == i + 1).Select(b => b.Block)]))],
        Steps = [.. steps.Select(s => new RaceStepView(s.Step.Step, s.Arm, s.Step.Count, s.Step.Converged, s.Use, s.Round))],
        Guard = baseline?.View,
        Cost = Cost(),
        Verdict = Verdict,
        Log = [.. log],
    };

    private RaceArm Arm(ArmState arm)
    {
        var differences = arm.DifferencesTo(arms[0]);
        return new RaceArm
        {
            Arm = arm.Index,
            Name = arm.Name,
            Settings = arm.Settings,
            Changes = SettingsDifference.Between(setup.InUse, arm.Settings),
            Origin = arm.Origin,
            State = Verdict?.Winner == arm.Index ? "winner" : arm.In ? "in" : "out",
            OutWhy = arm.OutWhy,
            OutRound = arm.OutRound,
            Mean = arm.Mean,
            Difference = arm.Index == 0 || differences.Length == 0 ? null : differences.Average(),
            Rounds = arm.Scores.Count,
            StepsRun = arm.StepsRun,
            CappedSteps = arm.CappedSteps,
        };
    }

    /// <summary>Every step of the rounds but arm 0's scored ones, against arm 0's score of its round (its latest one, or the steps before, while that is not known).</summary>
    private RaceCost Cost()
    {
        double iterations = 0;
        double? seconds = baseline?.MeanSeconds is null ? null : 0;
        var capped = 0;
        foreach (var step in steps)
        {
            if (step.Arm > 0 && !step.Step.Converged) capped++;
            if (step.Use == "watched" || (step.Arm == 0 && step.Use == "scored")) continue;
            var (count, time) = ArmZeroAround(step.Round);
            iterations += step.Step.Count - count;
            seconds = step.Step.Seconds is { } s && time is { } t ? seconds + s - t : seconds;
        }
        return new RaceCost(iterations, capped, seconds);
    }

    private (double Count, double? Seconds) ArmZeroAround(int number)
    {
        var mine = steps.Where(s => s.Arm == 0 && s.Use == "scored" && s.Round <= number).ToList();
        if (mine.Count == 0) return (baseline!.Mean, baseline.MeanSeconds);
        var latest = mine[^1].Round;
        mine.RemoveAll(s => s.Round != latest);
        return (mine.Average(s => s.Step.Count), mine.All(s => s.Step.Seconds is not null) ? mine.Average(s => s.Step.Seconds!.Value) : baseline!.MeanSeconds);
    }

    private string Sentence() => State switch
    {
        RaceState.Waiting => $"Waiting: {Text(options.StepsBefore - before.Count)} more complete steps under the settings in use before the first round.",
        RaceState.Running => Wish is not null || inForce != block.Arm
            ? $"Round {Text(round)} of at most {Text(options.Rounds)}: waiting for the run to take over {(block.Arm == 0 ? "the settings in use" : arms[block.Arm].Name)}."
            : $"Round {Text(round)} of at most {Text(options.Rounds)}: {(block.Arm == 0 ? "the settings in use" : arms[block.Arm].Name)} in turn, {Text(block.Scored)} of {Text(ScoredNow)} steps scored.",
        RaceState.Watching => $"{Verdict!.Text} Watched for {Text(options.StepsWatched)} steps, {Text(watchedCount)} so far.",
        _ => Verdict!.Text,
    };
}
