namespace CouplingWatch.Monitoring.State;

/// <summary>What is kept of the iterations of one step. Rows are reused from step to step; at most <see cref="MostRows"/> are kept, the oldest go first.</summary>
internal sealed class StepTrace
{
    /// <summary>A longer step (or a steady run) keeps its latest rows.</summary>
    public const int MostRows = 2048;

    private TraceRow[] rows = [];
    private double[] fieldValues = [];
    private int first;

    public int Step { get; private set; } = -1;

    public int Attempt { get; private set; }

    public int FieldCount { get; private set; }

    /// <summary>Rows kept.</summary>
    public int Count { get; private set; }

    /// <summary>Iterations seen, kept or not.</summary>
    public int Seen { get; private set; }

    /// <summary>Row <paramref name="i"/>, 0 the oldest kept.</summary>
    public ref readonly TraceRow this[int i] => ref rows[Place(i)];

    /// <summary>Residual norm of field <paramref name="field"/> in row <paramref name="i"/>; NaN when it was not sent.</summary>
    public double Residual(int i, int field) => fieldValues[(Place(i) * FieldCount + field) * 2];

    /// <summary>Need of field <paramref name="field"/> in row <paramref name="i"/>; NaN while its tolerance is unknown.</summary>
    public double Need(int i, int field) => fieldValues[(Place(i) * FieldCount + field) * 2 + 1];

    public void Begin(int step, int attempt, int fieldCount)
    {
        Step = step;
        Attempt = attempt;
        Count = Seen = first = 0;
        if (fieldCount == FieldCount) return;
        FieldCount = fieldCount;
        fieldValues = new double[rows.Length * fieldCount * 2];
    }

    public void Add(in TraceRow row, FieldBook fields)
    {
        if (Count == rows.Length && rows.Length < MostRows) Grow();
        Seen++;
        if (Count == rows.Length) first = first + 1 == rows.Length ? 0 : first + 1;
        else Count++;
        var place = Place(Count - 1);
        rows[place] = row;
        for (var f = 0; f < FieldCount && f < fields.All.Count; f++)
        {
            var field = fields.All[f];
            var at = (place * FieldCount + f) * 2;
            fieldValues[at] = field.Sent ? field.Residual : double.NaN;
            fieldValues[at + 1] = field.Need ?? double.NaN;
        }
    }

    private int Place(int i)
    {
        if ((uint)i >= (uint)Count) throw new ArgumentOutOfRangeException(nameof(i), i, $"must lie in 0…{Count - 1}");
        var place = first + i;
        return place >= rows.Length ? place - rows.Length : place;
    }

    private void Grow()
    {
        var length = Math.Min(MostRows, Math.Max(16, rows.Length * 2));
        Array.Resize(ref rows, length);
        Array.Resize(ref fieldValues, length * FieldCount * 2);
    }
}

/// <param name="Norm">Weighted norm of the stacked residual, as sent (may be NaN).</param>
/// <param name="Z">log10 of it, finite.</param>
/// <param name="Need">y; NaN while the tolerance is unknown.</param>
/// <param name="Rate">10^slope of the last six z; NaN with fewer than two.</param>
/// <param name="Remaining">Iterations still foretold then; NaN when nothing was foretold.</param>
/// <param name="Relaxation">As sent; NaN when not.</param>
internal readonly record struct TraceRow(int Iteration, long Seq, double Norm, double Z, double Need, double Rate, double Remaining, double Relaxation, bool Done);
