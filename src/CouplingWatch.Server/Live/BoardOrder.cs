using CouplingWatch.Wire;

namespace CouplingWatch.Server.Live;

/// <summary>The order of the board: what is at stake first, never by name; the name only settles what is left.</summary>
internal static class BoardOrder
{
    public static readonly IComparer<RunSummary> ByStake = Comparer<RunSummary>.Create((a, b) =>
    {
        var order = Live(b).CompareTo(Live(a));
        if (order == 0) order = (b.NodeHoursAtStake ?? 0).CompareTo(a.NodeHoursAtStake ?? 0);
        if (order == 0) order = Worst(b).CompareTo(Worst(a));
        if (order == 0) order = Nullable.Compare(b.LastRecordAt, a.LastRecordAt);
        return order != 0 ? order : string.CompareOrdinal(a.Run, b.Run);
    });

    private static bool Live(RunSummary run) => run.State is "live" or "quiet";

    private static int Worst(RunSummary run) => run.Verdict.Severity is { } severity ? 1 + (int)severity : 0;
}
