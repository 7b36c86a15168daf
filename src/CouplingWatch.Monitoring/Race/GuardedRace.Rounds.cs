namespace CouplingWatch.Monitoring.Race;

/// <summary>Rounds, blocks, and who is dropped for its scores.</summary>
public sealed partial class GuardedRace
{
    private void BeginRound()
    {
        round++;
        place = -1;
        var order = arms.Where(a => a.In && (a.Index > 0 || !ArmZeroRests)).Select(a => a.Index).ToArray();
        RoundOrder.Draw(setup.Seed, round, order);
        orders.Add(order);
        NextBlock();
    }

    private void NextBlock()
    {
        var order = orders[^1];
        do place++;
        while (place < order.Length && !arms[order[place]].In);
        if (place >= order.Length)
        {
            EndRound();
            return;
        }
        block = new Block(order[place]);
        Want(block.Arm, $"round {Text(round)}, block {Text(place + 1)} of {Text(order.Length)}");
    }

    private void EndRound()
    {
        if (ArmZeroRests) arms[0].Score(round, setup.ScoreBy == Wire.RaceScore.Seconds ? baseline!.MeanSeconds!.Value : baseline!.Mean);
        if (round >= options.RoundsBeforeDropping) DropForScores();
        var left = arms.Count(a => a.Index > 0 && a.In);
        Say(null, "round", $"Round {Text(round)} is complete; {left} challenger{(left == 1 ? "" : "s")} left.");
        if (left == 0 || round >= options.Rounds) End();
        else BeginRound();
    }

    private void DropForScores()
    {
        var ranked = arms.Where(a => a.Index > 0 && a.In).Select(a => (Arm: a, Differences: a.DifferencesTo(arms[0]))).ToList();
        foreach (var (arm, differences) in ranked)
        {
            if (differences.Length > 0 && IsWorse(differences))
                Leave(arm, null, $"on average {Text(differences.Average())} {Unit} a step above the settings in use over {Text(differences.Length)} rounds");
        }
        if (round >= options.Rounds) return;
        var left = ranked.Where(r => r.Arm.In).OrderBy(r => r.Differences.DefaultIfEmpty(0).Average()).ThenBy(r => r.Arm.Index).ToList();
        foreach (var (arm, differences) in left.Skip((left.Count + 1) / 2))
            Leave(arm, null, $"not among the better half after round {Text(round)} ({Signed(differences.DefaultIfEmpty(0).Average())} {Unit} a step)", runnerUp: true);
    }

    /// <summary>
    /// Among several challengers: a mean above arm 0's. A single one is being measured, and leaving for a bad mean would keep only the races
    /// that look good: two thirds of the no-effect races end that way and the bounded intervals of the rest cover 91 %. It leaves when it was higher in every round,
    /// a quarter of the no-effect races, none of which could have given an interval below zero: then at least 1 − (1/32)/(3/4) = 95.8 %.
    /// </summary>
    private bool IsWorse(double[] differences) => arms.Count == 2 ? differences.All(d => d > 0) : differences.Average() > 0;

    private void Want(int arm, string why)
    {
        wanted = arm;
        reason = why;
        if (arm == published)
        {
            Wish = null;
            return;
        }
        var target = arms[arm];
        IReadOnlyList<string> commands = [];
        if (arm > 0 && baseline is { AtCap: true } && setup.MayDropHistory && (spoilt || !options.RestsAtCap))
        {
            commands = ["dropHistory"];
            spoilt = false;
        }
        Wish = new RaceWish(arm, target.Settings, commands, $"{setup.Id}: {target.Name} ({why})");
        Say(null, "turn", $"{(arm == 0 ? "The settings in use are" : $"{target.Name} is")} published: {why}.", arm);
    }
}
