namespace ColdPlate.Layers;

/// <summary>
/// Mesh of a flat layer beside the interface: columns along it, nodes across it. Node 0 lies on the interface and owns half a cell,
/// node <see cref="Inner"/> + 1 lies on the far wall, whose temperature is held. The ends of the layer are insulated.
/// </summary>
/// <param name="Length">Along the interface, m.</param>
/// <param name="Thickness">Across, m.</param>
/// <param name="Columns">Columns along the interface, 2 or more.</param>
/// <param name="Inner">Nodes between interface and far wall, 1 or more.</param>
public sealed record LayerMesh(double Length, double Thickness, int Columns, int Inner)
{
    /// <summary>Width of a column, m.</summary>
    public double Width => Length / Columns;

    /// <summary>Distance between nodes across the layer, m.</summary>
    public double Spacing => Thickness / (Inner + 1);

    /// <summary>Throws when a size is out of range.</summary>
    public LayerMesh Checked()
    {
        if (!(Length > 0 && Thickness > 0))
            throw new ArgumentOutOfRangeException(nameof(Length), $"Length {Length} m and thickness {Thickness} m are above 0.");
        ArgumentOutOfRangeException.ThrowIfLessThan(Columns, 2);
        ArgumentOutOfRangeException.ThrowIfLessThan(Inner, 1);
        return this;
    }
}

/// <param name="Conductivity">W/(m K), above 0.</param>
/// <param name="HeatCapacity">Per volume, J/(m³ K), above 0.</param>
public sealed record LayerMaterial(double Conductivity, double HeatCapacity);
