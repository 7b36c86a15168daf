using CouplingWatch.Components.Parts;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Board;

/// <summary>
/// The order of the lanes: by node-hours at stake, never by name. It is settled when the page opens and when the reader asks, so a live
/// page never moves a lane under the pointer; runs that appear meanwhile stand at the end. Not safe from several threads.
/// </summary>
public sealed class LaneOrder
{
    private readonly Dictionary<string, int> places = [];
    private readonly Dictionary<string, bool> calm = [];

    /// <summary>Settles order and height of the lanes as they should be now.</summary>
    public void Settle(IEnumerable<RunSummary> runs)
    {
        ArgumentNullException.ThrowIfNull(runs);
        places.Clear();
        calm.Clear();
        foreach (var run in ByStake(runs)) Add(run);
    }

    /// <summary>The runs in the settled order; new ones last, in the order of their stake.</summary>
    public IReadOnlyList<RunSummary> Apply(IReadOnlyList<RunSummary> runs)
    {
        ArgumentNullException.ThrowIfNull(runs);
        foreach (var run in ByStake(runs.Where(r => !places.ContainsKey(r.Run)))) Add(run);
        return [.. runs.OrderBy(r => places[r.Run])];
    }

    /// <summary>True when settling now would change the order, or make a lane large that asks for something.</summary>
    public bool IsStale(IReadOnlyList<RunSummary> runs)
    {
        ArgumentNullException.ThrowIfNull(runs);
        var applied = Apply(runs);
        return runs.Any(r => calm[r.Run] && Asks(r)) || !ByStake(runs).Select(r => r.Run).SequenceEqual(applied.Select(r => r.Run));
    }

    /// <summary>Drawn small, as settled.</summary>
    public bool IsCalm(string run) => calm.GetValueOrDefault(run, true);

    /// <summary>
    /// Most at stake first. Where the stake is not known yet, the severity stands for it: a critical run before all, a warning after every
    /// run with a node-hour at stake, a note after those. Closed runs last, the newest first.
    /// </summary>
    public static IReadOnlyList<RunSummary> ByStake(IEnumerable<RunSummary> runs)
    {
        ArgumentNullException.ThrowIfNull(runs);
        return [.. runs
            .OrderBy(Closed)
            .ThenByDescending(r => Closed(r) ? 0 : Stake(r))
            .ThenByDescending(r => Closed(r) ? -1 : r.Verdict.Severity is { } s ? (int)s : -1)
            .ThenByDescending(r => Closed(r) ? r.LastRecordAt : null)
            .ThenBy(r => r.Run, StringComparer.Ordinal)];
    }

    /// <summary>The run has sent its last record.</summary>
    public static bool Closed(RunSummary run)
    {
        ArgumentNullException.ThrowIfNull(run);
        return run.State is not ("live" or "quiet");
    }

    // Rounded, so that lanes do not change places over hundredths of a node-hour.
    private static double Stake(RunSummary run) => Math.Round(run.NodeHoursAtStake ?? run.Verdict.Severity switch
    {
        Severity.Critical => double.PositiveInfinity,
        Severity.Warning => 0.9,
        Severity.Note => 0.1,
        _ => 0,
    }, 1);

    private static bool Asks(RunSummary run) => !Closed(run) && StateMarks.Asks(StateMarks.Of(run.Verdict));

    private void Add(RunSummary run)
    {
        places[run.Run] = places.Count;
        calm[run.Run] = !Asks(run);
    }
}
