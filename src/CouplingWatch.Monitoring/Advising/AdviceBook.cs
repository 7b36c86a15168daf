using CouplingWatch.Monitoring.Alerts;
using CouplingWatch.Monitoring.Checks;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Advising;

/// <summary>The advice that stands and all that was given: one piece a setting, the cause's first.</summary>
internal sealed class AdviceBook(string run)
{
    /// <summary>Pieces of advice kept, standing or not.</summary>
    public const int Kept = 500;

    private readonly List<Advice> given = [];
    private readonly HashSet<string> dismissed = [];
    private List<Advice> standing = [];
    private long since;
    private IReadOnlyList<Advice>? listed;

    /// <summary>What stands now, best first.</summary>
    public IReadOnlyList<Advice> Standing => standing;

    /// <summary>All that was given, in order of seq; each as it was given last.</summary>
    public IReadOnlyList<Advice> Given => listed ??= [.. given];

    /// <summary>Works the advice out anew: what the open alerts call for, causes first, then what a healthy run could do better.</summary>
    public void Renew(RunState state, AlertBook alerts, ICheck[] checks, List<Change> changes)
    {
        List<(Move Move, List<string> Because)> moves = [];
        List<Move> proposed = [];
        var entries = alerts.Standing.Where(e => !e.Held).OrderBy(e => CheckIds.AdviceRank(e.Alert.Check, state.UsesSecants)).ToArray();
        foreach (var entry in entries)
        {
            proposed.Clear();
            foreach (var check in checks) check.Advise(state, entry.Alert, proposed);
            foreach (var move in proposed) Merge(moves, move, entry.Alert.Id);
        }
        if (entries.Length == 0)
        {
            proposed.Clear();
            StandingAdvice.Propose(state, proposed);
            foreach (var move in proposed) Merge(moves, move, null);
        }
        List<Advice> now = [];
        foreach (var (move, because) in moves)
        {
            if (dismissed.Contains(move.Key)) continue;
            now.Add(Give(state, move, because));
        }
        foreach (var entry in entries) alerts.Answer(entry, [.. now.Where(a => a.Because.Contains(entry.Alert.Id)).Select(a => a.Id)]);
        if (now.Count != standing.Count || now.Where((a, i) => a.Id != standing[i].Id || a.Text != standing[i].Text).Any())
            changes.Add(new Change(ChangeKind.Advice));
        standing = now;
    }

    /// <summary>A person does not want it; it comes back when the settings change.</summary>
    public bool Dismiss(string id)
    {
        var advice = standing.Find(a => a.Id == id);
        if (advice is null) return false;
        dismissed.Add(KeyOf(advice));
        standing = [.. standing.Where(a => a.Id != id)];
        return true;
    }

    public void SettingsChanged(long seq)
    {
        since = seq;
        dismissed.Clear();
        standing = [];
    }

    private Advice Give(RunState state, Move move, List<string> because)
    {
        var earlier = standing.Find(a => KeyOf(a) == move.Key) ?? given.FindLast(a => a.Seq >= since && KeyOf(a) == move.Key);
        var (adjustable, value) = Adjustability.Of(state, move);
        var advice = new Advice
        {
            Id = earlier?.Id ?? FormattableString.Invariant($"{run}~advice~{move.Key}~{state.Seq}"),
            Setting = move.Setting,
            Move = move.Direction,
            To = move.To,
            From = move.From,
            Value = value,
            Solver = move.Solver,
            Field = move.Field,
            Because = because,
            Expected = move.Expected,
            Alters = move.AltersResult ? "result" : "cost",
            Adjustable = adjustable,
            Text = adjustable ? move.Text : move.Text + Adjustability.NeedsRestart(move),
            Caveat = move.Caveat,
            Seq = earlier?.Seq ?? state.Seq,
        };
        listed = null;
        var at = given.FindLastIndex(a => a.Id == advice.Id);
        if (at >= 0) given[at] = advice;
        else given.Add(advice);
        if (given.Count > Kept) given.RemoveAt(0);
        return advice;
    }

    /// <summary>The first to propose a setting decides which way; a later one that agrees adds its reason.</summary>
    private static void Merge(List<(Move Move, List<string> Because)> moves, Move move, string? because)
    {
        foreach (var (earlier, reasons) in moves)
        {
            if (earlier.Key != move.Key) continue;
            if (earlier.Direction == move.Direction && earlier.To == move.To && because is not null && !reasons.Contains(because)) reasons.Add(because);
            return;
        }
        moves.Add((move, because is null ? [] : [because]));
    }

    private static string KeyOf(Advice advice) => advice.Solver is null && advice.Field is null ? advice.Setting : $"{advice.Setting}~{advice.Solver ?? advice.Field}";
}
