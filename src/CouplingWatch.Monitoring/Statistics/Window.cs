namespace CouplingWatch.Monitoring.Statistics;

/// <summary>The latest values of a series, at most <see cref="Capacity"/> of them; adding never allocates.</summary>
internal sealed class Window
{
    private readonly double[] values;
    private int next;

    /// <param name="capacity">1 or more.</param>
    public Window(int capacity)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(capacity, 1);
        values = new double[capacity];
    }

    public int Capacity => values.Length;

    public int Count { get; private set; }

    public bool IsFull => Count == values.Length;

    /// <summary>The value <paramref name="back"/> places before the newest; 0 is the newest.</summary>
    public double this[int back]
    {
        get
        {
            if ((uint)back >= (uint)Count) throw new ArgumentOutOfRangeException(nameof(back), back, $"must lie in 0…{Count - 1}");
            var at = next - 1 - back;
            return values[at < 0 ? at + values.Length : at];
        }
    }

    public void Add(double value)
    {
        values[next] = value;
        next = next + 1 == values.Length ? 0 : next + 1;
        if (Count < values.Length) Count++;
    }

    public void Clear()
    {
        Count = 0;
        next = 0;
    }

    /// <summary>Copies the latest <paramref name="n"/> values (fewer when there are fewer), oldest first, and returns the part filled.</summary>
    /// <param name="into">At least <paramref name="n"/> long.</param>
    public Span<double> Latest(int n, Span<double> into)
    {
        n = Math.Min(n, Count);
        for (var i = 0; i < n; i++) into[i] = this[n - 1 - i];
        return into[..n];
    }
}
