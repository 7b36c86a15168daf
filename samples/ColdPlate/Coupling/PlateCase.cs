using ColdPlate.Layers;

namespace ColdPlate.Coupling;

/// <summary>One cold-plate problem: a thin channel of liquid-metal coolant over a poorly conducting plate with embedded heaters.</summary>
public sealed record PlateCase
{
    public LayerMesh ChannelMesh { get; init; } = new(0.025, 0.18e-3, 60, 8);

    public LayerMaterial Coolant { get; init; } = new(25.5, 2.3e6);

    /// <summary>Mean velocity of the coolant, m/s.</summary>
    public double Velocity { get; init; } = 0.02;

    public LayerMesh PlateMesh { get; init; } = new(0.025, 4e-3, 60, 12);

    public LayerMaterial Plate { get; init; } = new(1.5, 1.6e6);

    /// <summary>Relative growth of the plate's conductivity, 1/K.</summary>
    public double ConductivitySlope { get; init; } = 2e-4;

    /// <summary>Inner tolerance of the plate solver; declared as its noise.</summary>
    public double InnerTolerance { get; init; } = 1e-9;

    /// <summary>Heaters along the plate; 0 for none.</summary>
    public int Heaters { get; init; } = 4;

    /// <summary>Peak power of a heater, W/m² of interface.</summary>
    public double HeaterPower { get; init; } = 2e5;

    /// <summary>Swing of the inflow temperature, K.</summary>
    public double InflowSwing { get; init; } = 3;

    /// <summary>s.</summary>
    public double TimeStep { get; init; } = 0.05;

    /// <summary>Coupling tolerance relative to the norm of the output.</summary>
    public double Relative { get; init; } = 1e-7;

    /// <summary>Absolute coupling tolerance, K.</summary>
    public double Absolute { get; init; } = 1e-10;
}
