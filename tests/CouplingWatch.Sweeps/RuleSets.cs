using CouplingWatch.Monitoring.Race;

namespace CouplingWatch.Sweeps;

/// <summary>Rules of the race to compare.</summary>
internal static class RuleSets
{
    public static IReadOnlyList<(string Name, RaceOptions Options)> All { get; } =
    [
        ("plain", RaceOptions.Plain),
        ("runners-up", RaceOptions.Plain with { RunnersUpMayWin = true }),
        ("rests at cap", RaceOptions.Plain with { RestsAtCap = true }),
        ("guard on credit", RaceOptions.Plain with { GuardOnCredit = true }),
        ("fall-back worst round", RaceOptions.Plain with { FallsBackBeyondWorstRound = true }),
        ("all four", RaceOptions.Mended),
        ("later: discard 3", RaceOptions.Mended with { DiscardedLater = 3 }),
        ("later: score 5", RaceOptions.Mended with { ScoredLater = 5 }),
        ("later: discard 3, score 5", RaceOptions.Mended with { DiscardedLater = 3, ScoredLater = 5 }),
        ("later 3/5, win 0.95/0.6", RaceOptions.Mended with { DiscardedLater = 3, ScoredLater = 5, WinRatio = 0.95, WinShare = 0.6 }),
    ];
}
