namespace CouplingWatch.Records;

/// <summary>The first record of a run: who it is, what is coupled, with which settings, and what may be changed in flight.</summary>
public sealed record OpenRecord : StreamRecord
{
    public override string Kind => "open";
    public int Format { get; init; } = 1;
    public string? Instance { get; init; }
    public string? Campaign { get; init; }
    public string? Title { get; init; }
    public CouplingScheme Scheme { get; init; } = CouplingScheme.Serial;
    public Stepping Stepping { get; init; } = Stepping.Transient;
    public IReadOnlyList<SolverDeclaration> Solvers { get; init; } = [];
    public required IReadOnlyList<FieldDeclaration> Fields { get; init; }
    public CouplingSettings Settings { get; init; } = new();
    public AdjustableSettings Adjustable { get; init; } = new();
    /// <summary>Length of a time step, in the run's own seconds.</summary>
    public double? TimeStep { get; init; }
    public double? EndTime { get; init; }
    public DateTimeOffset? AllocationEndsAt { get; init; }
    public double? Nodes { get; init; }
    public double? BeatSeconds { get; init; }
    public Continuation? Continues { get; init; }
    public IReadOnlyDictionary<string, string> Provenance { get; init; } = EmptyStrings;
    public IReadOnlyDictionary<string, string> Labels { get; init; } = EmptyStrings;

    internal static readonly IReadOnlyDictionary<string, string> EmptyStrings = new Dictionary<string, string>();
}

public enum CouplingScheme { Serial, Parallel }

public enum Stepping { Transient, Steady }

/// <param name="Noise">Relative error its inner iterations leave in its output; null when not declared.</param>
/// <param name="Cost">Relative cost, if declared.</param>
public sealed record SolverDeclaration(string Name, double? Noise = null, double? Cost = null);

/// <summary>A quantity exchanged at the interface.</summary>
public sealed record FieldDeclaration
{
    public required string Name { get; init; }
    public string? Unit { get; init; }
    /// <summary>Number of values; null until the first vector fixes it.</summary>
    public int? Size { get; init; }
    public FieldRole Role { get; init; } = FieldRole.Unknown;
    public string? From { get; init; }
    public string? Group { get; init; }
    /// <summary>Multiplier of this field in the code's own least squares; null when not declared (then 1 is used).</summary>
    public double? Weight { get; init; }
    public FieldNorm Norm { get; init; } = FieldNorm.Euclidean;
    public ToleranceReference RelativeTo { get; init; } = ToleranceReference.Output;
    public double? Relative { get; init; }
    public double? Absolute { get; init; }
}

public enum FieldRole { Unknown, Checked }

public enum FieldNorm { Euclidean, Rms, Max, Weighted }

public enum ToleranceReference { Output, First, PreviousStep, None }

/// <summary>What a restart continues. <see cref="Basis"/> is <c>kept</c> when the secant columns survived.</summary>
public sealed record Continuation(string Run, int? Step, string? Basis);
