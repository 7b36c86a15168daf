namespace CouplingWatch.Numerics.Sequences;

/// <summary>The latest values of a sequence, oldest first, in memory fixed at the start. Any double may be held, NaN included.</summary>
public sealed class RingWindow
{
    private readonly double[] values;
    private int next;

    /// <summary>An empty window.</summary>
    /// <param name="capacity">Values held at most, 1 or more.</param>
    public RingWindow(int capacity)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(capacity, 1);
        values = new double[capacity];
    }

    /// <summary>Values held at most.</summary>
    public int Capacity => values.Length;

    /// <summary>Values held now.</summary>
    public int Count { get; private set; }

    /// <summary>The window is full.</summary>
    public bool IsFull => Count == values.Length;

    /// <summary>Value <paramref name="index"/>, 0 the oldest held.</summary>
    public double this[int index]
    {
        get
        {
            if ((uint)index >= (uint)Count) throw new ArgumentOutOfRangeException(nameof(index), index, $"must be 0 to {Count - 1}");
            int place = next - Count + index;
            return values[place < 0 ? place + values.Length : place];
        }
    }

    /// <summary>The newest value.</summary>
    public double Newest => this[Count - 1];

    /// <summary>Adds a value; the oldest leaves when the window is full.</summary>
    public void Add(double value)
    {
        values[next] = value;
        next = next + 1 == values.Length ? 0 : next + 1;
        if (Count < values.Length) Count++;
    }

    /// <summary>Empties the window.</summary>
    public void Clear() => (Count, next) = (0, 0);

    /// <summary>Copies the newest min(<see cref="Count"/>, <paramref name="target"/> length) values, oldest first; returns how many.</summary>
    public int CopyNewest(Span<double> target)
    {
        int count = Math.Min(Count, target.Length);
        for (int i = 0; i < count; i++) target[i] = this[Count - count + i];
        return count;
    }
}
