using CouplingWatch.Numerics.Secants;

namespace CouplingWatch.Coupling.QuasiNewton;

/// <summary>
/// Secant columns of the step in hand and of earlier steps, in order of birth: v = r_{k+1} − r_k in a <see cref="SecantBasis"/>,
/// w = x̃_{k+1} − x̃_k beside it. A closed step takes up one place even when it brought no columns.
/// </summary>
internal sealed class SecantHistory
{
    private readonly record struct Column(ColumnName Name, double[] Output);

    private readonly List<Column> columns = [];
    private readonly List<int> closed = []; // number of columns of each closed step, oldest first
    private readonly int capacity;
    private readonly double[] residual, output, difference;
    private bool hasPrevious;
    private int live, step, attempt, iteration;

    /// <param name="size">Length N of the interface vector.</param>
    /// <param name="capacity">Closed steps kept at most.</param>
    public SecantHistory(int size, int capacity)
    {
        this.capacity = capacity;
        Basis = new SecantBasis(size);
        residual = new double[size];
        output = new double[size];
        difference = new double[size];
    }

    /// <summary>The columns v, oldest first.</summary>
    public SecantBasis Basis { get; }

    /// <summary>Columns of the step in hand.</summary>
    public int Live => live;

    public void Begin(int stepNumber, int attemptNumber)
    {
        DropLive();
        (step, attempt, iteration, hasPrevious) = (stepNumber, attemptNumber, 0, false);
    }

    /// <summary>Takes the pair of one pass; from the second pass of a step on it forms a column. Zero and non-finite columns are not taken.</summary>
    public void Take(ReadOnlySpan<double> r, ReadOnlySpan<double> xTilde)
    {
        if (hasPrevious)
        {
            for (var i = 0; i < difference.Length; i++) difference[i] = r[i] - residual[i];
            if (Basis.Append(difference).Taken)
            {
                var w = new double[difference.Length];
                for (var i = 0; i < w.Length; i++) w[i] = xTilde[i] - output[i];
                columns.Add(new Column(new ColumnName(step, iteration - 1, attempt), w));
                live++;
            }
        }
        r.CopyTo(residual);
        xTilde.CopyTo(output);
        hasPrevious = true;
        iteration++;
    }

    /// <summary>Ends the step; its columns stay when they are lent.</summary>
    public void End(bool lend)
    {
        if (lend)
        {
            closed.Add(live);
            live = 0;
            while (closed.Count > capacity || (closed.Count > 1 && columns.Count - closed[0] >= Basis.RowCount)) DropOldestStep();
        }
        else
        {
            DropLive();
        }
        hasPrevious = false;
    }

    /// <summary>Forgets every closed step.</summary>
    public void Clear()
    {
        while (closed.Count > 0) DropOldestStep();
    }

    /// <summary>Arrival indices of the columns in use, newest first: those of the step in hand, then of <paramref name="historySteps"/> closed steps.</summary>
    public int[] Order(int historySteps)
    {
        var count = live;
        for (var i = 1; i <= historySteps && i <= closed.Count; i++) count += closed[^i];
        var order = new int[count];
        for (var i = 0; i < count; i++) order[i] = columns.Count - 1 - i;
        return order;
    }

    /// <summary>The same, one list a step; steps without columns are left out.</summary>
    public IEnumerable<int[]> OrderByStep(int historySteps)
    {
        var newest = columns.Count;
        for (var i = 0; i <= historySteps && i <= closed.Count; i++)
        {
            var count = i == 0 ? live : closed[^i];
            var order = new int[count];
            for (var c = 0; c < count; c++) order[c] = newest - 1 - c;
            newest -= count;
            if (count > 0) yield return order;
        }
    }

    public ColumnName Name(int arrival) => columns[arrival].Name;

    /// <summary>w of the column at an arrival index.</summary>
    public ReadOnlySpan<double> Output(int arrival) => columns[arrival].Output;

    private void DropLive()
    {
        for (; live > 0; live--)
        {
            Basis.RemoveAt(columns.Count - 1);
            columns.RemoveAt(columns.Count - 1);
        }
    }

    private void DropOldestStep()
    {
        var count = closed[0];
        closed.RemoveAt(0);
        columns.RemoveRange(0, count);
        Basis.RemoveOldest(count);
    }
}
