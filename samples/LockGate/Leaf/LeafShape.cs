namespace LockGate.Leaf;

/// <summary>Places on the leaf as sparse rows over its unknowns (two a node, the clamped sill node left out).</summary>
internal sealed class LeafShape(double height, int elements)
{
    public double ElementLength { get; } = height / elements;

    public int Unknowns { get; } = 2 * elements;

    /// <summary>Index of local unknown <paramref name="k"/> of element <paramref name="e"/>, or −1 for the clamped sill.</summary>
    public static int Unknown(int e, int k) => 2 * e + k - 2;

    /// <summary>Row that gives the deflection at a height above the sill (m).</summary>
    public LeafRow At(double y)
    {
        if (!(y >= 0 && y <= height)) throw new ArgumentOutOfRangeException(nameof(y), y, $"A height on the leaf lies between 0 and {height} m.");
        var e = Math.Min(elements - 1, (int)(y / ElementLength));
        var s = y / ElementLength - e;
        var row = new LeafRow();
        for (var k = 0; k < 4; k++) row.Add(Unknown(e, k), HermiteElement.Shape(k, s));
        return row;
    }

    /// <summary>Row that gives the mean deflection between two heights; its transpose turns a uniform pressure into a consistent load.</summary>
    public LeafRow Mean(double from, double to)
    {
        var row = new LeafRow();
        for (var e = 0; e < elements; e++)
        {
            var low = Math.Clamp(from / ElementLength - e, 0, 1);
            var high = Math.Clamp(to / ElementLength - e, 0, 1);
            if (high <= low) continue;
            for (var k = 0; k < 4; k++)
                row.Add(Unknown(e, k), (HermiteElement.Integral(k, high) - HermiteElement.Integral(k, low)) * ElementLength / (to - from));
        }
        return row;
    }
}

/// <summary>Sparse row over the unknowns of the leaf.</summary>
internal sealed class LeafRow
{
    private readonly List<(int Unknown, double Weight)> entries = [];

    public IReadOnlyList<(int Unknown, double Weight)> Entries => entries;

    public void Add(int unknown, double weight)
    {
        if (unknown >= 0) entries.Add((unknown, weight));
    }

    public double Dot(ReadOnlySpan<double> x)
    {
        var sum = 0.0;
        foreach (var (unknown, weight) in entries) sum += weight * x[unknown];
        return sum;
    }

    public void AddTo(Span<double> y, double factor)
    {
        foreach (var (unknown, weight) in entries) y[unknown] += factor * weight;
    }
}
