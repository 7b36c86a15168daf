using CouplingWatch.Components.Formatting;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Ledger;

/// <summary>A column of the basis as a row of the ledger.</summary>
/// <param name="FirstOfStep">Its step begins here (read downwards, newest first), so the step is named and a rule drawn above.</param>
/// <param name="Length">Length of its bar, 0…1 of the log axis.</param>
/// <param name="Changes">Kept now and left out under the what-if, or the other way round.</param>
public sealed record LedgerRow(BasisColumn Column, bool FirstOfStep, double Length, bool Kept, bool Changes);

/// <summary>The rows of the ledger for a basis, with a threshold tried on them.</summary>
public static class LedgerRows
{
    /// <summary>Decades of the log axis, as its lowest power: −10, or −15 where the threshold lies below that.</summary>
    public static int Lowest(BasisView basis, double? tried = null)
    {
        ArgumentNullException.ThrowIfNull(basis);
        var smallest = new[] { basis.Threshold, tried ?? 1, basis.AdvisedThreshold ?? 1 }.Where(t => t > 0).DefaultIfEmpty(1).Min();
        return smallest < 0.99e-10 ? -15 : -10;
    }

    /// <summary>Rows newest first. A basis the server has not answered for yet is judged by its shares, which is exact but for columns that hang on one that moved.</summary>
    public static IReadOnlyList<LedgerRow> Of(BasisView inForce, BasisView shown, double threshold, int lowest)
    {
        ArgumentNullException.ThrowIfNull(inForce);
        ArgumentNullException.ThrowIfNull(shown);
        var now = inForce.Columns.ToDictionary(c => c.Birth, c => c.Kept);
        var answered = shown.Threshold.Equals(threshold);
        var rows = new List<LedgerRow>(shown.Columns.Count);
        var step = int.MinValue;
        foreach (var column in shown.Columns)
        {
            var kept = answered ? column.Kept : column.Share > 0 && column.Share >= threshold;
            rows.Add(new(column, column.Birth.Step != step, Length(column.Share, lowest), kept, now.TryGetValue(column.Birth, out var was) && was != kept));
            step = column.Birth.Step;
        }
        return rows;
    }

    /// <summary>Place of a share on the log axis, 0 at 10^lowest or below, 1 at 1.</summary>
    public static double Length(double share, int lowest) =>
        !(share > 0) ? 0 : Math.Clamp(1 - Math.Log10(share) / lowest, 0, 1);

    /// <summary>What the bars measure under a rule, for the caption.</summary>
    public static string Measures(FilterRule rule) => rule switch
    {
        FilterRule.OwnNorm => "new direction each column brings, as a share of its own norm; newest first",
        FilterRule.PivotRatio => "pivot of each column over the largest kept; newest first",
        _ => "new direction each column brings; newest first",
    };

    public static string Named(FilterRule? rule) => rule switch
    {
        FilterRule.OwnNorm => "own-norm",
        FilterRule.PivotRatio => "pivot-ratio",
        FilterRule.None => "none",
        FilterRule.Other => "the code's own",
        _ => "not declared",
    };

    public static IReadOnlyList<string> Columns { get; } = ["born in step", "iteration", "share", "kept or left out"];

    public static IReadOnlyList<IReadOnlyList<string>> Table(IReadOnlyList<LedgerRow> rows) =>
        [.. rows.Select(r => new[] { Numbers.Count(r.Column.Birth.Step), Numbers.Count(r.Column.Birth.Iteration), r.Column.Share > 0 ? Numbers.Power(r.Column.Share, 3) : Numbers.Dash, r.Kept ? "kept" : "left out" })];
}
