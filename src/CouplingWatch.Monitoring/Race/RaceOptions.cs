namespace CouplingWatch.Monitoring.Race;

/// <summary>The constants of a race. A bad value throws in <see cref="Checked"/>.</summary>
public sealed record RaceOptions
{
    /// <summary>Complete steps under the settings in use before the first round; 12.</summary>
    public int StepsBefore { get; init; } = 12;

    /// <summary>First steps of that window that do not count towards p90; 3.</summary>
    public int StepsLeftOut { get; init; } = 3;

    /// <summary>Most challengers; 6.</summary>
    public int Challengers { get; init; } = 6;

    /// <summary>Most rounds; 5.</summary>
    public int Rounds { get; init; } = 5;

    /// <summary>Steps of a block that are not scored; 1.</summary>
    public int Discarded { get; init; } = 1;

    /// <summary>Steps of a block that are scored; 3.</summary>
    public int Scored { get; init; } = 3;

    /// <summary>Steps of a block not scored from the third round on, when few arms are left and long histories need time to fill; 1.</summary>
    public int DiscardedLater { get; init; } = 1;

    /// <summary>Steps of a block scored from the third round on; 3.</summary>
    public int ScoredLater { get; init; } = 3;

    /// <summary>The guard's limit is max(factor · p90, p90 + margin); 1.5.</summary>
    public double GuardFactor { get; init; } = 1.5;

    /// <summary>Iterations; 3.</summary>
    public double GuardMargin { get; init; } = 3;

    /// <summary>Rounds before the first challengers are dropped for their scores; 2.</summary>
    public int RoundsBeforeDropping { get; init; } = 2;

    /// <summary>The winner's mean is at most this share of arm 0's; 0.92.</summary>
    public double WinRatio { get; init; } = 0.92;

    /// <summary>Share of the common rounds in which the winner is lower than arm 0; 0.75.</summary>
    public double WinShare { get; init; } = 0.75;

    /// <summary>Steps of the winner that are watched after publishing; 10.</summary>
    public int StepsWatched { get; init; } = 10;

    /// <summary>Steps to wait for a published revision to be applied before the race gives up; 20.</summary>
    public int Patience { get; init; } = 20;

    /// <summary>A challenger dropped only for its rank, with at least three rounds, may still win when those left do not; false.</summary>
    public bool RunnersUpMayWin { get; init; }

    /// <summary>Where arm 0 is at the cap it takes no blocks and counts with the cap; its columns then spoil no challenger's history; false.</summary>
    public bool RestsAtCap { get; init; }

    /// <summary>A converged step beyond the guard's limit is forgiven when the challenger has saved more than it costs; false.</summary>
    public bool GuardOnCredit { get; init; }

    /// <summary>The winner falls back when its mean lies above arm 0's worst round instead of above its mean; false.</summary>
    public bool FallsBackBeyondWorstRound { get; init; }

    /// <summary>The plain rules, which are the default.</summary>
    public static RaceOptions Plain { get; } = new();

    /// <summary>With the four mends above. Better on the variants they were made on, not on those never used for that, so they stay off.</summary>
    public static RaceOptions Mended { get; } = new() { RunnersUpMayWin = true, RestsAtCap = true, GuardOnCredit = true, FallsBackBeyondWorstRound = true };

    /// <summary>These options, when every value lies in its range.</summary>
    /// <exception cref="ArgumentOutOfRangeException">Names the value and its range.</exception>
    public RaceOptions Checked()
    {
        AtLeast(StepsBefore, 1, nameof(StepsBefore));
        AtLeast(StepsLeftOut, 0, nameof(StepsLeftOut));
        if (StepsLeftOut >= StepsBefore)
            throw new ArgumentOutOfRangeException(nameof(StepsLeftOut), StepsLeftOut, $"must be below StepsBefore ({StepsBefore})");
        AtLeast(Challengers, 1, nameof(Challengers));
        AtLeast(Rounds, 1, nameof(Rounds));
        AtLeast(Discarded, 0, nameof(Discarded));
        AtLeast(Scored, 1, nameof(Scored));
        AtLeast(RoundsBeforeDropping, 1, nameof(RoundsBeforeDropping));
        AtLeast(StepsWatched, 1, nameof(StepsWatched));
        AtLeast(Patience, 1, nameof(Patience));
        if (!(GuardFactor >= 1)) throw new ArgumentOutOfRangeException(nameof(GuardFactor), GuardFactor, "must be 1 or more");
        if (!(GuardMargin >= 0)) throw new ArgumentOutOfRangeException(nameof(GuardMargin), GuardMargin, "must be 0 or more");
        if (WinRatio is not (> 0 and <= 1)) throw new ArgumentOutOfRangeException(nameof(WinRatio), WinRatio, "must lie in 0 < ratio ≤ 1");
        if (WinShare is not (>= 0 and <= 1)) throw new ArgumentOutOfRangeException(nameof(WinShare), WinShare, "must lie in 0…1");
        return this;
    }

    private static void AtLeast(int value, int least, string name) => ArgumentOutOfRangeException.ThrowIfLessThan(value, least, name);
}
