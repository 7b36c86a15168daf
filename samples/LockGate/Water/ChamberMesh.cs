namespace LockGate.Water;

/// <summary>Uniform finite-volume mesh of a rectangular lock chamber: the leaf at x = 0, the far wall at x = length, the bed at y = 0, the free surface at y = depth.</summary>
public sealed class ChamberMesh
{
    /// <param name="length">Distance from leaf to far wall, m, above 0.</param>
    /// <param name="depth">Water depth, m, above 0.</param>
    /// <param name="cellsAlong">Cells from leaf to far wall, 2 or more.</param>
    /// <param name="cellsUp">Cells from bed to surface, 2 or more; also the number of faces on the leaf.</param>
    public ChamberMesh(double length, double depth, int cellsAlong, int cellsUp)
    {
        if (!(length > 0) || !double.IsFinite(length))
            throw new ArgumentOutOfRangeException(nameof(length), length, "The chamber length is in metres and above 0.");
        if (!(depth > 0) || !double.IsFinite(depth))
            throw new ArgumentOutOfRangeException(nameof(depth), depth, "The water depth is in metres and above 0.");
        ArgumentOutOfRangeException.ThrowIfLessThan(cellsAlong, 2);
        ArgumentOutOfRangeException.ThrowIfLessThan(cellsUp, 2);
        Length = length;
        Depth = depth;
        CellsAlong = cellsAlong;
        CellsUp = cellsUp;
    }

    public double Length { get; }

    public double Depth { get; }

    public int CellsAlong { get; }

    public int CellsUp { get; }

    /// <summary>Cell width along the chamber, m.</summary>
    public double Width => Length / CellsAlong;

    /// <summary>Cell height, m; also the height of one leaf face.</summary>
    public double Height => Depth / CellsUp;

    public int CellCount => CellsAlong * CellsUp;

    /// <summary>Index of cell (i along, j up): cells of one level lie next to each other.</summary>
    public int Cell(int i, int j) => j * CellsAlong + i;

    /// <summary>Height of the middle of leaf face <paramref name="j"/> above the sill, m.</summary>
    public double FaceMiddle(int j) => (j + 0.5) * Height;
}
