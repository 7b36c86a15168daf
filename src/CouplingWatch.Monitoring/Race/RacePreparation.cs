using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Race;

/// <summary>What would start a race, or why none can start.</summary>
/// <param name="Event">To be journaled and observed; null when no race can start.</param>
/// <param name="Refused">Challengers left out, each with its reason.</param>
/// <param name="Code">Stable: no-open, run-closed, race-running, steady-run, revision-pending, no-challenger; null when one can start.</param>
/// <param name="Why">One sentence; null when one can start.</param>
public sealed record RacePreparation(RaceStartedEvent? Event, IReadOnlyList<RefusedChallenger> Refused, string? Code, string? Why)
{
    internal static RacePreparation Refusal(string code, string why) => new(null, [], code, why);
}
