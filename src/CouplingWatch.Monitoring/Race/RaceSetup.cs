using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Race;

/// <summary>What a race is told at its start. With the steps, revisions and events that follow it fixes every decision.</summary>
public sealed record RaceSetup
{
    /// <summary>Id of the race in its run, such as <c>race-1</c>.</summary>
    public required string Id { get; init; }

    public required string Run { get; init; }

    public string? By { get; init; }

    public string? Reason { get; init; }

    public DateTimeOffset? StartedAt { get; init; }

    /// <summary>Seed of the orders drawn.</summary>
    public long Seed { get; init; }

    public RaceScore ScoreBy { get; init; }

    /// <summary>The complete settings in force: arm 0.</summary>
    public required CouplingSettings InUse { get; init; }

    /// <summary>The revision in force.</summary>
    public int Revision { get; init; }

    /// <summary>In order; more than the options allow throw.</summary>
    public required IReadOnlyList<RaceChallenger> Challengers { get; init; }

    /// <summary>Most iterations a step; null when not declared.</summary>
    public int? Cap { get; init; }

    /// <summary>The code takes the command <c>dropHistory</c>.</summary>
    public bool MayDropHistory { get; init; }

    /// <summary>Latest complete steps under the settings in force, oldest first; more than are needed may stand here.</summary>
    public IReadOnlyList<RaceStep> Before { get; init; } = [];
}

/// <summary>A complete step of the run, or a rejected attempt at one.</summary>
/// <param name="Count">Passes of the step.</param>
/// <param name="Seconds">Wall seconds of its passes; null when not sent.</param>
/// <param name="Revision">In force by the run's own <c>applied</c> records.</param>
/// <param name="Whole">False when records of it are missing: it is not scored.</param>
public readonly record struct RaceStep(int Step, int Count, StepOutcome Outcome, double? Seconds, int Revision, bool Whole = true)
{
    public bool Converged => Outcome == StepOutcome.Converged;
}

/// <summary>A revision the race wants published now.</summary>
/// <param name="Arm">Whose settings they are.</param>
/// <param name="Settings">The complete settings.</param>
/// <param name="Commands"><c>dropHistory</c>, or none.</param>
/// <param name="Reason">One sentence for the record.</param>
public sealed record RaceWish(int Arm, CouplingSettings Settings, IReadOnlyList<string> Commands, string Reason);
