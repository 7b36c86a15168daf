using CouplingWatch.Numerics.Trials;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Race;

/// <summary>How a race ends, and what becomes of its winner.</summary>
public sealed partial class GuardedRace
{
    /// <summary>With fewer rounds than allow it no interval is given; five rounds allow 93.75 %.</summary>
    private const double LeastConfidence = 0.9;

    private const int RoundsOfRunnerUp = 3;

    private int watched;
    private int watchedCount;
    private double watchedSum;

    /// <summary>Null while the race runs.</summary>
    public RaceVerdict? Verdict { get; private set; }

    private void End()
    {
        var best = arms.Where(MayWin).OrderBy(a => a.DifferencesTo(arms[0]).Average()).ThenBy(a => a.Index).FirstOrDefault(Wins) ?? BestSoFar();
        var effect = Effect(best);
        if (best is not null && MayWin(best) && Wins(best))
        {
            State = RaceState.Watching;
            var text = $"{best.Name} is published: {Text(best.MeanBeside(arms[0]))} {Unit} a step against {Text(arms[0].MeanBeside(best))}{Interval(effect)}.";
            Verdict = new RaceVerdict("publish", text, best.Index, effect, "watching");
            Say(null, "verdict", text, best.Index);
            Want(best.Index, "it won the race");
            return;
        }
        Want(0, "the race is over");
        if (baseline!.AtCap && arms.All(a => a.Index == 0 || a.CappedSteps > 0))
            Finish("nothing-compared", "Every challenger reached the cap as the settings in use do: settings alone do not mend this run.", effect);
        else if (best is null)
            Finish("keep", "Nothing better was found: every challenger left before its first score. The settings in use stay.", null);
        else
            Finish("keep", $"Nothing better was found: the best, {best.Name}, took {Text(best.MeanBeside(arms[0]))} {Unit} a step against {Text(arms[0].MeanBeside(best))}{Interval(effect)}. The settings in use stay.", effect);
    }

    private bool MayWin(ArmState arm) => arm.Index > 0 && arm.DifferencesTo(arms[0]).Length > 0
        && (arm.In || (options.RunnersUpMayWin && arm.RunnerUp && arm.Scores.Count >= RoundsOfRunnerUp));

    private bool Wins(ArmState arm)
    {
        var differences = arm.DifferencesTo(arms[0]);
        return differences.Length > 0
            && arm.MeanBeside(arms[0]) <= options.WinRatio * arms[0].MeanBeside(arm)
            && differences.Count(d => d < 0) >= options.WinShare * differences.Length;
    }

    /// <summary>The challenger still in with the lowest mean difference; when none is, the one that ran most rounds, then the lowest. Null when none was scored.</summary>
    private ArmState? BestSoFar() => arms
        .Where(a => a.Index > 0 && a.DifferencesTo(arms[0]).Length > 0)
        .OrderByDescending(a => a.In).ThenByDescending(a => a.DifferencesTo(arms[0]).Length)
        .ThenBy(a => a.DifferencesTo(arms[0]).Average()).ThenBy(a => a.Index)
        .FirstOrDefault();

    private RaceEffect? Effect(ArmState? arm)
    {
        if (arm is null) return null;
        var common = arm.Scores.Keys.Where(arms[0].Scores.ContainsKey).ToArray();
        var paired = PermutationInterval.Of([.. common.Select(r => arms[0].Scores[r])], [.. common.Select(r => arm.Scores[r])], LeastConfidence);
        var bounded = paired.Confidence >= LeastConfidence && double.IsFinite(paired.Low);
        return new RaceEffect(arm.Index, paired.Effect, bounded ? paired.Low : null, bounded ? paired.High : null, bounded ? paired.Confidence : null, paired.Rounds, arms.Count - 1);
    }

    private string Interval(RaceEffect? effect) => effect is not { Low: { } low, High: { } high, Level: { } level }
        ? ""
        : $" ({Signed(low)} to {Signed(high)}, {Text(Math.Round(100 * level))} % interval from {Text(effect.Rounds)} rounds)";

    private void Finish(string code, string text, RaceEffect? effect, string? watch = null)
    {
        State = RaceState.Finished;
        Verdict = new RaceVerdict(code, text, watch == "held" ? Verdict?.Winner : null, effect, watch);
        Say(null, "verdict", text);
    }

    /// <summary>Watches the winner: back at once after a capped step, or when its mean lies above arm 0's after ten steps.</summary>
    private void Watch(in RaceStep step, int arm)
    {
        var winner = arms[Verdict!.Winner!.Value];
        Keep(step, arms[arm], "watched");
        if (arm != winner.Index)
        {
            if (++waited > options.Patience) Stop(null, $"the run took over no settings for {options.Patience} steps");
            return;
        }
        waited = 0;
        watched++;
        var settling = watched <= options.Discarded;
        if (step.Outcome != StepOutcome.Converged && !(settling && baseline!.AtCap))
        {
            FallBack(step.Step, $"step {Text(step.Step)} under it did not converge");
            return;
        }
        if (settling || !step.Whole) return;
        if (setup.ScoreBy == RaceScore.Seconds && step.Seconds is null) return;
        watchedCount++;
        watchedSum += setup.ScoreBy == RaceScore.Seconds ? step.Seconds!.Value : step.Count;
        if (watchedCount < options.StepsWatched) return;
        var mean = watchedSum / watchedCount;
        var limit = options.FallsBackBeyondWorstRound ? arms[0].Scores.Values.Max() : arms[0].MeanBeside(winner);
        if (mean > limit)
        {
            FallBack(step.Step, $"its mean over {Text(watchedCount)} steps is {Text(mean)} {Unit} a step, the settings before had {(options.FallsBackBeyondWorstRound ? "at most " : "")}{Text(limit)} in the race");
            return;
        }
        State = RaceState.Finished;
        Verdict = Verdict with { Watch = "held", Text = $"{Verdict.Text} It held over the next {Text(watchedCount)} steps: {Text(mean)}." };
        Say(step.Step, "verdict", $"{winner.Name} held: {Text(mean)} {Unit} a step over {Text(watchedCount)} steps.", winner.Index);
    }

    private void FallBack(int step, string why)
    {
        var winner = arms[Verdict!.Winner!.Value];
        Say(step, "fall-back", $"Back to the settings before: {why}.", 0);
        Want(0, $"fall-back, {why}");
        Finish("fell-back", $"{winner.Name} had won, but {why}. The settings before are published again.", Verdict.Effect, "fell-back");
    }
}
