namespace CouplingWatch.Monitoring.Checks.Divergence;

/// <summary>When a residual that grows counts as divergence. Decades are of the weighted residual norm.</summary>
public sealed record DivergenceOptions
{
    public const int DefaultFirstIteration = 4;
    public const double DefaultGrowthDecades = 1.5;
    public const double DefaultLeastSlope = 0.02;
    public const double DefaultAboveStartDecades = 0.3;
    public const double DefaultBelowHighestDecades = 0.3;
    public const int DefaultLowestIterationsBack = 4;
    public const int DefaultSlopeWindow = 5;

    /// <summary>Earliest iteration, 1…1000.</summary>
    public int FirstIteration { get; init; } = DefaultFirstIteration;
    /// <summary>Growth above the lowest residual of the step, above 0 and at most 20.</summary>
    public double GrowthDecades { get; init; } = DefaultGrowthDecades;
    /// <summary>Decades an iteration over the slope window, 0…5.</summary>
    public double LeastSlope { get; init; } = DefaultLeastSlope;
    /// <summary>How far above the first residual, 0…20.</summary>
    public double AboveStartDecades { get; init; } = DefaultAboveStartDecades;
    /// <summary>How near the highest of the step, 0…20.</summary>
    public double BelowHighestDecades { get; init; } = DefaultBelowHighestDecades;
    /// <summary>How many iterations the lowest lies back at least, 0…1000.</summary>
    public int LowestIterationsBack { get; init; } = DefaultLowestIterationsBack;
    /// <summary>Iterations of the slope, 2…16.</summary>
    public int SlopeWindow { get; init; } = DefaultSlopeWindow;

    internal void Validate(OptionFaults faults)
    {
        faults.Range("Divergence.FirstIteration", FirstIteration, 1, 1000);
        faults.Range("Divergence.GrowthDecades", GrowthDecades, 0.01, 20);
        faults.Range("Divergence.LeastSlope", LeastSlope, 0, 5);
        faults.Range("Divergence.AboveStartDecades", AboveStartDecades, 0, 20);
        faults.Range("Divergence.BelowHighestDecades", BelowHighestDecades, 0, 20);
        faults.Range("Divergence.LowestIterationsBack", LowestIterationsBack, 0, 1000);
        faults.Range("Divergence.SlopeWindow", SlopeWindow, 2, 16);
    }
}
