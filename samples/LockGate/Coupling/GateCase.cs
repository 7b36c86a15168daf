using LockGate.Leaf;
using LockGate.Loads;
using LockGate.Water;

namespace LockGate.Coupling;

/// <summary>Everything that makes up one coupled lock-gate problem: geometry, material, water, loads, tolerances.</summary>
public sealed record GateCase
{
    /// <summary>Height of leaf and water, m.</summary>
    public double Height { get; init; } = 12;

    /// <summary>Length of the chamber, m.</summary>
    public double Chamber { get; init; } = 30;

    public int CellsAlong { get; init; } = 75;

    public int CellsUp { get; init; } = 30;

    /// <summary>kg/m³.</summary>
    public double WaterDensity { get; init; } = 1000;

    /// <summary>Inner tolerance of the water solver; declared as its noise.</summary>
    public double InnerTolerance { get; init; } = 1e-8;

    public WarmStart WarmStart { get; init; } = WarmStart.LastPass;

    /// <summary>Mass of the leaf, kg/m².</summary>
    public double LeafMass { get; init; } = 700;

    /// <summary>EI of the leaf, N·m²/m.</summary>
    public double Rigidity { get; init; } = 4e7;

    public int Elements { get; init; } = 30;

    /// <summary>Stiffness-proportional damping of the leaf, s.</summary>
    public double Damping { get; init; } = 2e-3;

    public SealContact? Seal { get; init; }

    /// <summary>Pressure loss coefficient of the flow through the gap beside the leaf: p = −½ ρ c |v| v; 0 for none.</summary>
    public double GapDrag { get; init; } = 40;

    public IReadOnlyList<IGateLoad> Loads { get; init; } = [];

    public GroundMotion? Ground { get; init; }

    /// <summary>s.</summary>
    public double TimeStep { get; init; } = 0.005;

    /// <summary>Coupling tolerance relative to the norm of the output.</summary>
    public double Relative { get; init; } = 1e-7;

    /// <summary>Absolute coupling tolerance, m.</summary>
    public double Absolute { get; init; } = 1e-13;
}
