namespace CouplingWatch.Monitoring.State;

/// <summary>The traces of the latest steps and attempts; storage is reused.</summary>
internal sealed class TraceRing
{
    public const int Capacity = 32;

    private readonly StepTrace[] traces = new StepTrace[Capacity];
    private int next;

    public int Count { get; private set; }

    /// <summary>The one begun last; an empty one before the first.</summary>
    public StepTrace Latest => Count == 0 ? traces[0] ??= new StepTrace() : traces[(next - 1 + Capacity) % Capacity];

    /// <summary>Trace <paramref name="i"/>, 0 the oldest kept.</summary>
    public StepTrace this[int i] => traces[(next - Count + i + Capacity) % Capacity];

    public StepTrace Begin(int step, int attempt, int fieldCount)
    {
        var trace = traces[next] ??= new StepTrace();
        next = (next + 1) % Capacity;
        if (Count < Capacity) Count++;
        trace.Begin(step, attempt, fieldCount);
        return trace;
    }
}
