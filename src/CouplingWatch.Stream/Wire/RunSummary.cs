using CouplingWatch.Records;

namespace CouplingWatch.Wire;

/// <summary>A lane of the board.</summary>
public sealed record RunSummary
{
    public required string Run { get; init; }
    public string? Title { get; init; }
    public string? Campaign { get; init; }
    /// <summary>live, quiet, finished, aborted, diverged, stopped.</summary>
    public required string State { get; init; }
    public int Level { get; init; }
    public CouplingScheme Scheme { get; init; }
    public IReadOnlyList<string> Solvers { get; init; } = [];
    public double? Nodes { get; init; }
    public IReadOnlyDictionary<string, string> Labels { get; init; } = new Dictionary<string, string>();
    public required Verdict Verdict { get; init; }
    /// <summary>The step in progress (or the last one), and its last iteration; −1 before the first.</summary>
    public int Step { get; init; } = -1;
    public int Iteration { get; init; } = -1;
    public int StepsComplete { get; init; }
    public int? StepsPlanned { get; init; }
    /// <summary>Mean over the latest ten complete steps; null before the first.</summary>
    public double? IterationsPerStep { get; init; }
    public double? IterationsPerStepOverall { get; init; }
    public int CappedSteps { get; init; }
    public IReadOnlyList<StripBar> Strip { get; init; } = [];
    /// <summary>The passes of the step in progress, oldest first.</summary>
    public IReadOnlyList<PassPair> Passes { get; init; } = [];
    public RunForecast? Forecast { get; init; }
    public DateTimeOffset? AllocationEndsAt { get; init; }
    /// <summary>The one next thing to do; null: nothing.</summary>
    public Advice? Next { get; init; }
    /// <summary>Node-hours still to spend that are likely wasted; null when not known yet.</summary>
    public double? NodeHoursAtStake { get; init; }
    public double? NodeHoursLeft { get; init; }
    public IReadOnlyList<Alert> OpenAlerts { get; init; } = [];
    public DateTimeOffset? LastRecordAt { get; init; }
    /// <summary>Seq expected next; grows with every record, so it tells whether anything changed.</summary>
    public long NextSeq { get; init; }
    public int Revision { get; init; }
}

/// <summary>A bar of the step strip: one step, or a group of neighbouring steps that keeps its extremes.</summary>
/// <param name="Median">Median iterations of the group (the count itself for one step).</param>
/// <param name="Worst">Most iterations of a step of the group.</param>
/// <param name="MarginDecades">log10(last need), the least favourable of the group: 0 = just met, −1 = ten times below; null when no tolerance is known.</param>
/// <param name="Unconverged">How many of its steps gave up at the cap or failed.</param>
/// <param name="Redone">How many of its steps were tried again.</param>
/// <param name="Revision">The revision that first held in this group, when one changed here; null otherwise.</param>
public sealed record StripBar(int FromStep, int ToStep, double Median, int Worst, double? MarginDecades, int Unconverged = 0, int Redone = 0, int? Revision = null, double? Time = null, DateTimeOffset? At = null);

/// <summary>A pass of the step in progress.</summary>
/// <param name="Need">y: decades above the target, largest over the fields; null when no tolerance is known.</param>
/// <param name="LogNorm">z: log10 of the weighted residual norm.</param>
public sealed record PassPair(int Iteration, double? Need, double LogNorm, bool Done);

/// <summary>When the run ends, as its pace foretells.</summary>
public sealed record RunForecast
{
    public DateTimeOffset? Ends { get; init; }
    public DateTimeOffset? EndsEarly { get; init; }
    public DateTimeOffset? EndsLate { get; init; }
    public double? StepsLeft { get; init; }
    public double? StepsThatDoNotFit { get; init; }
    /// <summary>Chance that the end lies after the allocation, 0…1; null without an allocation.</summary>
    public double? ChanceToMiss { get; init; }
    public required string Text { get; init; }
}
