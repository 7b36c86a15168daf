namespace CouplingWatch.Monitoring.Basis;

/// <summary>Residual and output of the latest iterations of one group, weighted as the code's least squares weighs them; buffers are reused.</summary>
internal sealed class VectorRing
{
    /// <summary>Iterations kept: enough for sixty columns of steps of two to three iterations.</summary>
    public const int Capacity = 128;

    private readonly StoredIteration[] ring = new StoredIteration[Capacity];
    private int next;

    public int Count { get; private set; }

    /// <summary>Iteration <paramref name="i"/>, 0 the oldest kept.</summary>
    public StoredIteration this[int i] => ring[(next - Count + i + Capacity) % Capacity];

    public StoredIteration? Newest => Count == 0 ? null : this[Count - 1];

    /// <summary>The place for the next iteration, with buffers of this length to be filled.</summary>
    public StoredIteration Add(long ordinal, int step, int iteration, int length)
    {
        var entry = ring[next] ??= new StoredIteration();
        next = (next + 1) % Capacity;
        if (Count < Capacity) Count++;
        entry.Set(ordinal, step, iteration, length);
        return entry;
    }

    /// <summary>Takes back the latest iterations of an attempt that was rejected.</summary>
    public void Drop(long ordinal)
    {
        while (Count > 0 && this[Count - 1].Ordinal == ordinal)
        {
            next = (next - 1 + Capacity) % Capacity;
            Count--;
        }
    }

    public void Clear()
    {
        Count = 0;
        next = 0;
    }

    public StoredIteration? Find(long ordinal, int iteration)
    {
        for (var i = Count - 1; i >= 0; i--)
            if (this[i].Ordinal == ordinal && this[i].Iteration == iteration) return this[i];
        return null;
    }
}

internal sealed class StoredIteration
{
    public long Ordinal { get; private set; }

    public int Step { get; private set; }

    public int Iteration { get; private set; }

    /// <summary>r, weighted.</summary>
    public double[] Residual { get; private set; } = [];

    /// <summary>x̃, weighted.</summary>
    public double[] Output { get; private set; } = [];

    /// <summary>False when an entry of either is not finite.</summary>
    public bool Finite { get; set; }

    public void Set(long ordinal, int step, int iteration, int length)
    {
        Ordinal = ordinal;
        Step = step;
        Iteration = iteration;
        if (Residual.Length == length) return;
        Residual = new double[length];
        Output = new double[length];
    }
}
