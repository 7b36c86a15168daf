using CouplingWatch.Records;

namespace CoupledRuns;

/// <summary>How a coupled problem is run: its settings, its length, its pace and what it declares.</summary>
public sealed record RunPlan
{
    public required string Campaign { get; init; }

    public required string Title { get; init; }

    /// <summary>Declared settings; method, relaxation, history, filter, cap and predictor must all stand.</summary>
    public required CouplingSettings Settings { get; init; }

    /// <summary>What may be changed in flight.</summary>
    public AdjustableSettings Adjustable { get; init; } = Everything;

    /// <summary>Length of a time step, s.</summary>
    public required double TimeStep { get; init; }

    /// <summary>Number of steps, 1 or more.</summary>
    public int Steps { get; init; } = int.MaxValue;

    /// <summary>Step from which the time step is multiplied by <see cref="LaterFactor"/>; null for never.</summary>
    public int? LaterFrom { get; init; }

    public double LaterFactor { get; init; } = 1;

    /// <summary>Coupling iterations a second at most; 0 for as fast as the solvers go.</summary>
    public double Pace { get; init; }

    /// <summary>The run gives up as diverged when ‖r‖ exceeds this many times the larger of ‖r₀‖ of the step and ‖x̃‖ of the last accepted step.</summary>
    public double GiveUpAt { get; init; } = 1e6;

    /// <summary>The run gives up as diverged after this many unconverged steps in a row.</summary>
    public int GiveUpAfter { get; init; } = int.MaxValue;

    /// <summary>Send the vectors r and x̃ (level 3) and the basis (level 2), or norms only.</summary>
    public bool SendVectors { get; init; } = true;

    /// <summary>Nodes the run is said to hold; above 0.</summary>
    public double Nodes { get; init; } = 1;

    /// <summary>Hours from the opening until the allocation is said to end; null for none.</summary>
    public double? AllocationHours { get; init; }

    public IReadOnlyDictionary<string, string> Labels { get; init; } = new Dictionary<string, string>();

    /// <summary>Relaxation, filter rule, threshold and history in their useful ranges; both commands.</summary>
    public static AdjustableSettings Everything { get; } = new()
    {
        Ranges = new Dictionary<string, NumberRange>
        {
            ["relaxation"] = new(0.01, 1),
            ["filterThreshold"] = new(1e-12, 0.1),
            ["historySteps"] = new(0, 40),
        },
        Choices = new Dictionary<string, IReadOnlyList<string>> { ["filterRule"] = ["own-norm", "pivot-ratio"] },
        Commands = ["dropHistory", "stop"],
    };
}
