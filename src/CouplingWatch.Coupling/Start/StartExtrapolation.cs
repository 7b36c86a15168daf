namespace CouplingWatch.Coupling.Start;

/// <summary>
/// First interface vector of a step from the final outputs of earlier steps, newest a, b, c: order 0 a; order 1 2a − b;
/// order 2 3a − 3b + c. With fewer steps kept the order is lowered. Equal time steps are assumed.
/// </summary>
public sealed class StartExtrapolation
{
    private readonly double[][] kept = new double[3][];
    private int count;

    /// <param name="size">Length N of the interface vector, 1 or more.</param>
    public StartExtrapolation(int size)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(size, 1);
        Size = size;
        for (var i = 0; i < kept.Length; i++) kept[i] = new double[size];
    }

    public int Size { get; }

    /// <summary>Takes the final vector of a step; copied.</summary>
    public void Accept(ReadOnlySpan<double> final)
    {
        if (final.Length != Size) throw new ArgumentException($"{final.Length} entries; {Size} are needed.", nameof(final));
        (kept[0], kept[1], kept[2]) = (kept[2], kept[0], kept[1]);
        final.CopyTo(kept[0]);
        count = Math.Min(3, count + 1);
    }

    /// <summary>Forgets all but the newest vector, as after a change of the time step.</summary>
    public void Forget() => count = Math.Min(1, count);

    /// <summary>Writes the extrapolation of <paramref name="order"/> (0, 1, 2) to <paramref name="start"/>; zeros when nothing was accepted yet.</summary>
    public void Extrapolate(int order, Span<double> start)
    {
        if (order is < 0 or > 2) throw new ArgumentOutOfRangeException(nameof(order), order, "The order is 0, 1 or 2.");
        if (start.Length != Size) throw new ArgumentException($"{start.Length} entries; {Size} are needed.", nameof(start));
        var (a, b, c) = (kept[0], kept[1], kept[2]);
        for (var i = 0; i < start.Length; i++)
        {
            start[i] = Math.Min(order, count - 1) switch
            {
                < 0 => 0,
                0 => a[i],
                1 => 2 * a[i] - b[i],
                _ => 3 * a[i] - 3 * b[i] + c[i],
            };
        }
    }
}
