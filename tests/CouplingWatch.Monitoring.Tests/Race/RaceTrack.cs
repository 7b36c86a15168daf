using CouplingWatch.Monitoring.Race;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Race;

/// <summary>A made-up run under a race: it takes published settings over after a delay and counts iterations as it is told.</summary>
internal sealed class RaceTrack
{
    public static readonly CouplingSettings InUse = new()
    {
        Method = CouplingMethod.IqnIls,
        Relaxation = 0.1,
        HistorySteps = 4,
        FilterRule = FilterRule.PivotRatio,
        FilterThreshold = 1e-2,
        IterationCap = 40,
        PredictorOrder = 1,
    };

    public static CouplingSettings History(int steps) => InUse with { HistorySteps = steps };

    private readonly Func<int, CouplingSettings, RaceStep> play;
    private readonly int delay;
    private readonly List<Action<GuardedRace>> calls = [];
    private readonly List<(int Revision, int Arm, CouplingSettings Settings, int Due)> pending = [];
    private CouplingSettings inForce = InUse;
    private int revision;
    private int published;
    private int step;

    /// <param name="count">Iterations of a step under given settings; 40 and more are the cap.</param>
    public RaceTrack(Func<int, CouplingSettings, int> count, int delay = 0, int challengers = 2, RaceOptions? options = null, long seed = 1, IReadOnlyList<CouplingSettings>? against = null, bool mayDropHistory = true, int before = 12)
        : this((s, settings) => Step(s, count(s, settings)), delay, challengers, options, seed, against, mayDropHistory, before)
    {
    }

    public RaceTrack(Func<int, CouplingSettings, RaceStep> play, int delay, int challengers, RaceOptions? options = null, long seed = 1, IReadOnlyList<CouplingSettings>? against = null, bool mayDropHistory = true, int before = 12, RaceScore scoreBy = RaceScore.Iterations)
    {
        this.play = play;
        this.delay = delay;
        Options = options;
        Setup = new RaceSetup
        {
            Id = "race-1",
            Run = "leaf-1",
            InUse = InUse,
            Seed = seed,
            Cap = 40,
            MayDropHistory = mayDropHistory,
            ScoreBy = scoreBy,
            Challengers = [.. (against ?? [.. Enumerable.Range(0, challengers).Select(i => History(5 + i))]).Select(s => new RaceChallenger(s, "rule"))],
            Before = [.. Enumerable.Range(0, before).Select(_ => play(step++, InUse))],
        };
        Race = new GuardedRace(Setup, options);
    }

    public RaceOptions? Options { get; }

    public RaceSetup Setup { get; }

    public GuardedRace Race { get; }

    public CouplingSettings InForce => inForce;

    public List<RaceWish> Wishes { get; } = [];

    /// <summary>The run refuses a revision when this gives a reason.</summary>
    public Func<CouplingSettings, string?> Refuses { get; set; } = _ => null;

    public static RaceStep Step(int step, int count, double? seconds = null) =>
        new(step, Math.Min(count, 40), count >= 40 ? StepOutcome.Capped : StepOutcome.Converged, seconds, 0);

    /// <summary>Everything the race was told so far, told to another one.</summary>
    public GuardedRace Replay()
    {
        var race = new GuardedRace(Setup, Options);
        foreach (var call in calls) call(race);
        return race;
    }

    public RaceView RunToTheEnd(int most = 400)
    {
        for (var i = 0; i < most && !Race.IsOver; i++) OneStep();
        OneStep();
        return Race.View();
    }

    public void OneStep()
    {
        Publish();
        while (pending.Count > 0 && pending[0].Due <= step)
        {
            var (number, _, settings, _) = pending[0];
            pending.RemoveAt(0);
            if (Refuses(settings) is { } why)
            {
                Tell(race => race.Refused(number, why));
                Publish();
                continue;
            }
            inForce = settings;
            revision = number;
            Tell(race => race.Applied(number, settings));
        }
        var played = play(step, inForce) with { Step = step, Revision = revision };
        Tell(race => race.Observe(played));
        step++;
    }

    public void Tell(Action<GuardedRace> call)
    {
        calls.Add(call);
        call(Race);
    }

    private void Publish()
    {
        if (Race.Wish is not { } wish) return;
        Wishes.Add(wish);
        var number = ++published;
        Tell(race => race.Published(number, wish.Arm));
        pending.Add((number, wish.Arm, wish.Settings, step + delay));
    }
}
