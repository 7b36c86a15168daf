namespace CouplingWatch.Numerics.Sequences;

/// <summary>
/// Running quantiles of the latest values: the window is also held in rising order, so that a quantile costs nothing and a
/// new value one insertion (a move of at most <see cref="Capacity"/> doubles). No allocation after the start. NaN is refused.
/// </summary>
public sealed class SortedWindow
{
    private readonly RingWindow window;
    private readonly double[] rising;

    /// <summary>An empty window of <paramref name="capacity"/> values, 1 or more.</summary>
    public SortedWindow(int capacity)
    {
        window = new RingWindow(capacity);
        rising = new double[capacity];
    }

    /// <summary>Values held at most.</summary>
    public int Capacity => window.Capacity;

    /// <summary>Values held now.</summary>
    public int Count => window.Count;

    /// <summary>The values in rising order.</summary>
    public ReadOnlySpan<double> Rising => rising.AsSpan(0, Count);

    /// <summary>The values in order of arrival.</summary>
    public RingWindow Arrivals => window;

    /// <summary>Adds a value; the oldest leaves when the window is full.</summary>
    /// <exception cref="ArgumentException">The value is NaN.</exception>
    public void Add(double value)
    {
        if (double.IsNaN(value)) throw new ArgumentException("NaN has no place in an order", nameof(value));
        int count = window.Count;
        if (window.IsFull)
        {
            int leaves = Array.BinarySearch(rising, 0, count, window[0]);
            Array.Copy(rising, leaves + 1, rising, leaves, count - leaves - 1);
            count--;
        }
        int place = Array.BinarySearch(rising, 0, count, value);
        if (place < 0) place = ~place;
        Array.Copy(rising, place, rising, place + 1, count - place);
        rising[place] = value;
        window.Add(value);
    }

    /// <summary>Empties the window.</summary>
    public void Clear() => window.Clear();

    /// <summary>The p-quantile of the window, 0 ≤ p ≤ 1; NaN while empty.</summary>
    public double Quantile(double p) => Sequences.Quantile.OfSorted(Rising, p);

    /// <summary>The median of the window; NaN while empty.</summary>
    public double Median => Quantile(0.5);
}
