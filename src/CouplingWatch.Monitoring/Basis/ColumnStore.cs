using CouplingWatch.Numerics.Secants;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Basis;

/// <summary>The secant columns of one group in order of arrival, with their births, and which steps lend theirs.</summary>
internal sealed class ColumnStore(int rows)
{
    /// <summary>Columns kept at most; the oldest go first.</summary>
    public const int MostColumns = 160;

    private readonly List<StoredColumn> columns = [];
    private readonly List<AcceptedStep> accepted = [];

    public int Rows { get; } = rows;

    public SecantBasis Secants { get; } = new(rows);

    public int Count => columns.Count;

    /// <summary>Birth of the column with this arrival index.</summary>
    public ColumnBirth Birth(int index) => columns[index].Birth;

    /// <summary>The step or attempt the column with this arrival index was born in.</summary>
    public long Ordinal(int index) => columns[index].Ordinal;

    /// <summary>Appends the column of iterations k → k + 1; a zero one or one that is not finite is not taken.</summary>
    public void Append(ReadOnlySpan<double> v, ColumnBirth birth, long ordinal)
    {
        if (Count == MostColumns) RemoveOldest(MostColumns / 4);
        if (Secants.Append(v).Taken) columns.Add(new StoredColumn(birth, ordinal));
    }

    /// <summary>A step was accepted: it takes a place of the history; without <paramref name="lends"/> its columns go.</summary>
    public void Accept(int step, long ordinal, bool lends)
    {
        if (!lends) Drop(ordinal);
        accepted.Add(new AcceptedStep(step, ordinal));
        if (accepted.Count > 2 * MostColumns) accepted.RemoveRange(0, MostColumns);
    }

    /// <summary>A step or attempt came to nothing: its columns go.</summary>
    public void Drop(long ordinal)
    {
        for (var i = Count - 1; i >= 0 && columns[i].Ordinal >= ordinal; i--)
        {
            if (columns[i].Ordinal != ordinal) continue;
            Secants.RemoveAt(i);
            columns.RemoveAt(i);
        }
    }

    public void Clear()
    {
        Secants.Clear();
        columns.Clear();
        accepted.Clear();
    }

    /// <summary>The history starts anew: earlier steps lend nothing any more.</summary>
    public void DropHistory() => Clear();

    /// <summary>The columns in use after iteration <paramref name="iteration"/> of a step, newest first: its own, then those of the <paramref name="history"/> steps before it.</summary>
    /// <param name="live">How many of them are the step's own.</param>
    public int[] Order(long ordinal, int iteration, int history, out int live)
    {
        List<int> order = [];
        for (var i = Count - 1; i >= 0; i--)
            if (columns[i].Ordinal == ordinal && columns[i].Birth.Iteration < iteration) order.Add(i);
        live = order.Count;
        var oldest = OldestLender(ordinal, history);
        for (var i = Count - 1; i >= 0; i--)
            if (columns[i].Ordinal < ordinal && columns[i].Ordinal >= oldest) order.Add(i);
        return [.. order];
    }

    /// <summary>Arrival index of a column by its birth; −1 when it is not here.</summary>
    public int Find(ColumnBirth birth)
    {
        for (var i = Count - 1; i >= 0; i--)
            if (columns[i].Birth.Step == birth.Step && columns[i].Birth.Iteration == birth.Iteration) return i;
        return -1;
    }

    /// <summary>Lets go of columns no step can borrow any more, many at a time: removing a few costs as much as removing many.</summary>
    public void Trim(int history)
    {
        if (accepted.Count == 0) return;
        var oldest = OldestLender(long.MaxValue, history + 1);
        var unused = 0;
        while (unused < Count && columns[unused].Ordinal < oldest) unused++;
        if (unused > Math.Max(16, Count / 2)) RemoveOldest(unused);
    }

    private long OldestLender(long before, int history)
    {
        var oldest = long.MaxValue;
        for (var i = accepted.Count - 1; i >= 0 && history > 0; i--)
        {
            if (accepted[i].Ordinal >= before) continue;
            oldest = accepted[i].Ordinal;
            history--;
        }
        return oldest;
    }

    private void RemoveOldest(int count)
    {
        Secants.RemoveOldest(count);
        columns.RemoveRange(0, count);
    }

    private readonly record struct StoredColumn(ColumnBirth Birth, long Ordinal);

    private readonly record struct AcceptedStep(int Step, long Ordinal);
}
