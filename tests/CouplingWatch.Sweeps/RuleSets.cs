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
        ("all four", new RaceOptions()),
        ("four, win 0.95/0.6", new RaceOptions { WinRatio = 0.95, WinShare = 0.6 }),
    ];
}
