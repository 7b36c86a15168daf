using CouplingWatch.Monitoring.State;

namespace CouplingWatch.Monitoring.Basis;

/// <summary>What became of the promise of a step's first update, which rests on columns of earlier steps alone.</summary>
internal static class FirstUpdate
{
    /// <summary>Decades by which it missed its promise: log10 of (what was left ÷ what it left uncovered).</summary>
    /// <returns>Null when there was no such update or promise, it is not told yet, or little was left after it.</returns>
    /// <param name="promisedBelow">It promised something when it left less than this share uncovered.</param>
    /// <param name="leftAbove">Less than this share left is no miss.</param>
    public static double? Missed(GroupBasis group, double promisedBelow, double leftAbove)
    {
        if (group.Updates.Count == 0) return null;
        var first = group.Updates[0];
        if (first.Iteration > 1 || !first.Made || first.HistoryKept == 0 || first.HistoryKept < first.Kept || double.IsNaN(first.Came)) return null;
        if (!(first.Uncovered < promisedBelow) || !(first.Came > leftAbove)) return null;
        return Decades.Log(first.Came) - Decades.Log(first.Uncovered);
    }
}
