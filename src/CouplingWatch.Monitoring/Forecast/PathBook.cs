using CouplingWatch.Monitoring.State;

namespace CouplingWatch.Monitoring.Forecast;

/// <summary>The needs y₀, y₁, … of the latest converged steps, and how far along they were when their need was as now.</summary>
internal sealed class PathBook
{
    /// <summary>How many converged steps are kept.</summary>
    public const int Capacity = 20;

    /// <summary>A path is kept up to this many iterations; a longer step is not kept at all.</summary>
    public const int LongestPath = 1024;

    private readonly ConvergedPath[] paths = new ConvergedPath[Capacity];
    private int next;

    public int Count { get; private set; }

    /// <summary>Path <paramref name="i"/>, 0 the oldest kept.</summary>
    public ConvergedPath this[int i] => paths[(next - Count + i + Capacity) % Capacity];

    public void Clear()
    {
        Count = 0;
        next = 0;
    }

    /// <summary>Copies the needs of a converged step whose needs were all known.</summary>
    public void Add(StepTrace trace)
    {
        if (trace.Seen != trace.Count || trace.Count is 0 or > LongestPath) return;
        (paths[next] ??= new ConvergedPath()).CopyFrom(trace);
        next = (next + 1) % Capacity;
        if (Count < Capacity) Count++;
    }

    /// <summary>For each path that once had a need at or below <paramref name="need"/>, the iterations it still took from there.</summary>
    /// <param name="into">At least <see cref="Capacity"/> long.</param>
    /// <returns>The part filled, unsorted.</returns>
    public Span<double> Remaining(double need, Span<double> into)
    {
        var n = 0;
        for (var i = 0; i < Count; i++)
        {
            var path = this[i];
            var at = path.FirstAtOrBelow(need);
            if (at >= 0) into[n++] = path.Count - 1 - at;
        }
        return into[..n];
    }
}

/// <summary>The needs of one converged step, all fields together and each field.</summary>
internal sealed class ConvergedPath
{
    private double[] needs = [];
    private double[] lowest = [];
    private double[] fieldNeeds = [];

    public int Step { get; private set; }

    public int Count { get; private set; }

    public int FieldCount { get; private set; }

    public double this[int iteration] => needs[iteration];

    /// <summary>NaN where the field was not sent.</summary>
    public double FieldNeed(int iteration, int field) => fieldNeeds[iteration * FieldCount + field];

    /// <summary>First iteration with a need at or below <paramref name="need"/>; −1 when there is none.</summary>
    public int FirstAtOrBelow(double need)
    {
        if (Count == 0 || lowest[Count - 1] > need) return -1;
        int low = 0, high = Count - 1;
        while (low < high)
        {
            var middle = (low + high) / 2;
            if (lowest[middle] <= need) high = middle;
            else low = middle + 1;
        }
        return low;
    }

    public void CopyFrom(StepTrace trace)
    {
        Step = trace.Step;
        Count = trace.Count;
        FieldCount = trace.FieldCount;
        if (needs.Length < Count)
        {
            var length = Math.Max(16, 2 * Count);
            needs = new double[length];
            lowest = new double[length];
        }
        if (fieldNeeds.Length < Count * FieldCount) fieldNeeds = new double[needs.Length * FieldCount];
        var least = double.PositiveInfinity;
        for (var i = 0; i < Count; i++)
        {
            needs[i] = trace[i].Need;
            lowest[i] = least = Math.Min(least, needs[i]);
            for (var f = 0; f < FieldCount; f++) fieldNeeds[i * FieldCount + f] = trace.Need(i, f);
        }
    }
}
