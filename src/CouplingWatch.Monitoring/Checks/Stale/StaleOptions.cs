namespace CouplingWatch.Monitoring.Checks.Stale;

/// <summary>When reused columns count as stale, and how many such steps make an alert.</summary>
public sealed record StaleOptions
{
    public const double DefaultMissDecades = 2;
    public const double DefaultMisledDecades = 1;
    public const double DefaultLeftAbove = 0.1;
    public const double DefaultPromisedBelow = 0.3;
    public const int DefaultLeastEarlier = 5;
    public const double DefaultIncrementAbove = -1;
    public const double DefaultLeastAboveMedian = 1.5;
    public const double DefaultDeviations = 4;
    public const double DefaultIterationsMore = 2;
    public const int DefaultSteps = 3;
    public const int DefaultWithin = 5;
    public const double DefaultDearShare = 0.2;

    /// <summary>Level 2: decades by which the first update missed its promise; 0…20.</summary>
    public double MissDecades { get; init; } = DefaultMissDecades;
    /// <summary>Level 2: decades from which on the step counts as misled, which keeps <c>polluted</c> quiet after sound steps; 0…20.</summary>
    public double MisledDecades { get; init; } = DefaultMisledDecades;
    /// <summary>Level 2: … and more than this share of the residual was left; 0…10.</summary>
    public double LeftAbove { get; init; } = DefaultLeftAbove;
    /// <summary>Level 2: … of an update that left less than this uncovered; 0…1.</summary>
    public double PromisedBelow { get; init; } = DefaultPromisedBelow;
    /// <summary>Earlier steps needed to compare with; 1…20.</summary>
    public int LeastEarlier { get; init; } = DefaultLeastEarlier;
    /// <summary>Level 0: the first increment of z lies above this; −20…20.</summary>
    public double IncrementAbove { get; init; } = DefaultIncrementAbove;
    /// <summary>Level 0: … above the median of earlier ones by this, or …; 0…20.</summary>
    public double LeastAboveMedian { get; init; } = DefaultLeastAboveMedian;
    /// <summary>Level 0: … by this many robust deviations; 0…100.</summary>
    public double Deviations { get; init; } = DefaultDeviations;
    /// <summary>The step takes this many iterations more than the median of the latest ten; 0…100.</summary>
    public double IterationsMore { get; init; } = DefaultIterationsMore;
    /// <summary>Such steps within the next number of steps make an alert; 1…20.</summary>
    public int Steps { get; init; } = DefaultSteps;
    /// <summary>As many as the steps that make an alert, to 16.</summary>
    public int Within { get; init; } = DefaultWithin;

    /// <summary>Where more than this share of the earlier steps took as long already, dear steps are usual; 0…1.</summary>
    public double DearShare { get; init; } = DefaultDearShare;

    internal void Validate(OptionFaults faults)
    {
        faults.Range("Stale.MissDecades", MissDecades, 0, 20);
        faults.Range("Stale.MisledDecades", MisledDecades, 0, 20);
        faults.Range("Stale.LeftAbove", LeftAbove, 0, 10);
        faults.Range("Stale.PromisedBelow", PromisedBelow, 0, 1);
        faults.Range("Stale.LeastEarlier", LeastEarlier, 1, 20);
        faults.Range("Stale.IncrementAbove", IncrementAbove, -20, 20);
        faults.Range("Stale.LeastAboveMedian", LeastAboveMedian, 0, 20);
        faults.Range("Stale.Deviations", Deviations, 0, 100);
        faults.Range("Stale.IterationsMore", IterationsMore, 0, 100);
        faults.Range("Stale.Steps", Steps, 1, 20);
        faults.Range("Stale.Within", Within, Steps, 16);
        faults.Range("Stale.DearShare", DearShare, 0, 1);
    }
}
