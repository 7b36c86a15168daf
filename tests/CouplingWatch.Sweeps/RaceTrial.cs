using CouplingWatch.Monitoring.Race;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Sweeps;

/// <summary>One race on one variant from one starting setting, with what every arm would have given afterwards and what not racing would have cost.</summary>
internal sealed record RaceTrial
{
    public const int StepsAfter = 30;

    public required Variant Variant { get; init; }

    public required Start Start { get; init; }

    public required RaceView View { get; init; }

    /// <summary>Steps of the race, without the twelve before it.</summary>
    public int RaceSteps { get; init; }

    /// <summary>Mean of the 30 steps after the verdict as they really went, fall-back included.</summary>
    public double Outcome { get; init; }

    /// <summary>Mean of the same steps under each arm, switched to at the verdict; index = arm.</summary>
    public required double[] Arms { get; init; }

    /// <summary>Iterations of the race minus those of the same steps without a race; negative is saved.</summary>
    public double Cost { get; init; }

    public int CappedByChallengers { get; init; }

    public bool Diverged { get; init; }

    public double Keep => Arms[0];

    public double Best => Arms.Min();

    /// <summary>Worse than keeping by more than 5 %.</summary>
    public bool Harmful => Diverged || Outcome > 1.05 * Keep;

    public bool Within(double share) => Outcome <= (1 + share) * Best;

    /// <summary>No arm would have been more than 8 % better than keeping.</summary>
    public bool NothingToGain => Best >= 0.92 * Keep;

    /// <summary>Runs the race, and once more for every arm: the same steps up to the verdict, then that arm.</summary>
    /// <param name="whole">When given, the arms are instead read off runs that kept the arm's settings throughout: much faster, nearly the same.</param>
    /// <returns>Null when the run fails before the twelve steps are complete, so that there is nothing to race.</returns>
    public static RaceTrial? Run(Variant variant, Start start, RaceOptions options, long seed, WholeRuns? whole = null)
    {
        double? noise = variant.Make().Solvers.Max(s => s.Noise);
        var chosen = ChallengerList.Propose(start.Settings, Starts.Adjustable, noise, most: options.Challengers).Challengers;
        var raced = RacedRun.Raced(variant, start.Settings, before => new GuardedRace(new RaceSetup
        {
            Id = "race-1",
            Run = variant.Name,
            InUse = start.Settings,
            Seed = seed,
            Cap = start.Settings.IterationCap,
            MayDropHistory = true,
            Challengers = chosen,
            Before = before,
        }, options), options.StepsBefore, StepsAfter);
        if (raced.Race is null) return null;
        var view = raced.Race.View();
        var decided = raced.DecidedAt ?? raced.Steps.Count;
        var end = decided + StepsAfter;
        var arms = new double[chosen.Count + 1];
        for (var arm = 0; arm < arms.Length; arm++)
        {
            var settings = arm == 0 ? start.Settings : chosen[arm - 1].Settings;
            if (whole is not null)
            {
                arms[arm] = whole.Of(variant, settings).Skip(decided).Take(StepsAfter).Average();
                continue;
            }
            var prefix = raced.Changes.Where(c => c.Step < decided);
            IReadOnlyList<string> commands = arm > 0 && view.Guard is { AtCap: true } ? ["dropHistory"] : [];
            var run = RacedRun.Scripted(variant, start.Settings, end, prefix.Append(new Change(decided, settings, commands)));
            arms[arm] = MeanFrom(run, decided);
        }
        var kept = whole?.Of(variant, start.Settings).Take(decided).Sum() ?? RacedRun.Scripted(variant, start.Settings, decided, []).Steps.Sum(s => s.Count);
        return new RaceTrial
        {
            Variant = variant,
            Start = start,
            View = view,
            RaceSteps = decided - options.StepsBefore,
            Outcome = MeanFrom(raced, decided),
            Arms = arms,
            Cost = raced.Steps.Take(decided).Sum(s => s.Count) - kept,
            CappedByChallengers = view.Cost.CappedSteps,
            Diverged = raced.Outcome == CloseOutcome.Diverged,
        };
    }

    /// <summary>A run that diverged counts its missing steps as 40.</summary>
    private static double MeanFrom(RacedRun run, int from)
    {
        var counts = run.Steps.Skip(from).Take(StepsAfter).Select(s => (double)s.Count).ToList();
        while (counts.Count < StepsAfter) counts.Add(40);
        return counts.Average();
    }
}
