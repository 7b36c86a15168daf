namespace CouplingWatch.Monitoring.Checks.Progress;

/// <summary>What counts as no progress over the last eight iterations; shared by slow, noise-floor and stall.</summary>
public sealed record ProgressOptions
{
    public const double DefaultLeastImprovementDecades = 0.3;
    public const double DefaultFallingShare = 0.85;
    public const double DefaultTimesTheCapLeft = 2;
    public const double DefaultNoiseFloorDepthDecades = 1;
    public const double DefaultRisingBelowHighestDecades = 0.05;
    public const double DefaultRisingFallingShare = 0.3;

    /// <summary>Less than this many decades gained by the last eight iterations is no progress; above 0 and at most 5.</summary>
    public double LeastImprovementDecades { get; init; } = DefaultLeastImprovementDecades;
    /// <summary>Share of falling increments from which the residual crawls rather than wanders; 0…1.</summary>
    public double FallingShare { get; init; } = DefaultFallingShare;
    /// <summary>Slow when the rate needs more than this many times the iterations left to the cap; 1…100.</summary>
    public double TimesTheCapLeft { get; init; } = DefaultTimesTheCapLeft;
    /// <summary>A residual that fell this many decades first has met a floor; else it stalls; 0…20.</summary>
    public double NoiseFloorDepthDecades { get; init; } = DefaultNoiseFloorDepthDecades;
    /// <summary>The residual rises when it lies this near its highest …; 0…5.</summary>
    public double RisingBelowHighestDecades { get; init; } = DefaultRisingBelowHighestDecades;
    /// <summary>… and fewer than this share of increments fall; 0…1.</summary>
    public double RisingFallingShare { get; init; } = DefaultRisingFallingShare;

    internal void Validate(OptionFaults faults)
    {
        faults.Range("Progress.LeastImprovementDecades", LeastImprovementDecades, 0.001, 5);
        faults.Range("Progress.FallingShare", FallingShare, 0, 1);
        faults.Range("Progress.TimesTheCapLeft", TimesTheCapLeft, 1, 100);
        faults.Range("Progress.NoiseFloorDepthDecades", NoiseFloorDepthDecades, 0, 20);
        faults.Range("Progress.RisingBelowHighestDecades", RisingBelowHighestDecades, 0, 5);
        faults.Range("Progress.RisingFallingShare", RisingFallingShare, 0, 1);
    }
}
