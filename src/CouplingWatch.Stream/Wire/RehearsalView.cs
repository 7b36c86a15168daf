using CouplingWatch.Records;

namespace CouplingWatch.Wire;

/// <summary>What a rehearsal found: candidate settings replayed on the recorded passes. It orders and screens candidates; it decides and publishes nothing.</summary>
public sealed record RehearsalView
{
    public required RehearsalCalibration Calibration { get; init; }
    /// <summary>Best first when trusted; empty when not.</summary>
    public IReadOnlyList<RehearsedCandidate> Candidates { get; init; } = [];
    /// <summary>The best, when it lies at least 15 % below the settings in use; null: keep, or not trusted.</summary>
    public RehearsedCandidate? Proposal { get; init; }
    /// <summary>Said with every ranking.</summary>
    public required string Caveat { get; init; }
}

/// <summary>The settings in use replayed first.</summary>
/// <param name="Steps">Steps of the window; 0 when there were too few.</param>
/// <param name="Recorded">Mean iterations a step that were recorded in the window.</param>
/// <param name="Rehearsed">Score of the settings in use: √(mean own · mean strict).</param>
/// <param name="Miss">|ln(rehearsed / recorded)|; declined above 0.3.</param>
/// <param name="Why">Why it declines; null when trusted.</param>
public sealed record RehearsalCalibration(int Steps, double? Recorded, double? Rehearsed, double? Miss, bool Trusted, string? Why);

/// <param name="Settings">Only what differs from the settings in use.</param>
/// <param name="Mean">Score: √(own · strict), iterations a step.</param>
/// <param name="Own">Mean count with the pass fitted with the step it plays.</param>
/// <param name="Strict">Mean count with the pass fitted without it.</param>
/// <param name="CappedSteps">Most capped steps of the two plays.</param>
public sealed record RehearsedCandidate(CouplingSettings Settings, double Mean, double Own, double Strict, int CappedSteps, int Steps);
