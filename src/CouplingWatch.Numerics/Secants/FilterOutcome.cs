using CouplingWatch.Numerics.Matrices;

namespace CouplingWatch.Numerics.Secants;

/// <summary>Result of filtering secant columns: which stay, and the small factorisation of those. Immutable.</summary>
public sealed class FilterOutcome
{
    private readonly ColumnEntry[] entries;
    private readonly int[] kept;
    private readonly int[] left;

    internal FilterOutcome(SecantFilter rule, double threshold, ColumnEntry[] entries, GrowingQr factor)
    {
        Rule = rule;
        Threshold = threshold;
        Factor = factor;
        this.entries = entries;
        kept = [.. entries.Where(e => e.Fate == ColumnFate.Kept).Select(e => e.Index)];
        left = [.. entries.Where(e => e.Fate == ColumnFate.Left).Select(e => e.Index)];
    }

    /// <summary>The rule applied.</summary>
    public SecantFilter Rule { get; }

    /// <summary>The threshold ε applied.</summary>
    public double Threshold { get; }

    /// <summary>One entry per column asked about, newest first.</summary>
    public ReadOnlySpan<ColumnEntry> Columns => entries;

    /// <summary>Arrival indices of the kept columns, newest first: column j of R belongs to Kept[j].</summary>
    public ReadOnlySpan<int> Kept => kept;

    /// <summary>Arrival indices of the columns the rule left out, newest first.</summary>
    public ReadOnlySpan<int> Left => left;

    /// <summary>Number of columns the rule looked at: kept and left out.</summary>
    public int Considered => kept.Length + left.Length;

    /// <summary>How many of the first <paramref name="columns"/> columns asked about were kept (the live ones stand first).</summary>
    public int KeptAmongFirst(int columns)
    {
        int count = 0;
        for (int i = 0; i < Math.Min(columns, entries.Length); i++)
            if (entries[i].Fate == ColumnFate.Kept) count++;
        return count;
    }

    /// <summary>R of the kept columns, newest first: upper triangular, diagonal above 0. A copy.</summary>
    public SmallMatrix Triangle() => Factor.Triangle();

    internal GrowingQr Factor { get; }
}
