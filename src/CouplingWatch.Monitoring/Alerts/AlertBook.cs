using CouplingWatch.Monitoring.Checks;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Alerts;

/// <summary>The alerts of a run: opened by findings, updated when the condition recurs, closed after a while without it. At most one open alert a check.</summary>
internal sealed class AlertBook(string run)
{
    /// <summary>Converged steps without the condition after which an alert closes.</summary>
    public const int CleanSteps = 3;

    /// <summary>Iterations without it after which an alert of a steady run closes.</summary>
    public const int CleanIterations = 20;

    /// <summary>Closed alerts kept; the oldest go first.</summary>
    public const int ClosedKept = 1000;

    private readonly List<AlertEntry> entries = [];
    private readonly List<AlertEntry> standing = [];
    private readonly HashSet<string> spoken = [];
    private IReadOnlyList<Alert>? listed;

    /// <summary>All alerts, open and closed, in order of seq; those of an attempt without verdict are not among them yet.</summary>
    public IReadOnlyList<Alert> All => listed ??= [.. entries.Where(e => !e.Held).Select(e => e.Alert).OrderBy(a => a.Seq).ThenBy(a => CheckIds.Rank(a.Check))];

    /// <summary>The entries whose condition stands, held ones included.</summary>
    public IReadOnlyList<AlertEntry> Standing => standing;

    /// <summary>How many alerts are shelved.</summary>
    public int ShelvedCount { get; private set; }

    public IReadOnlyList<AlertEntry> Entries => entries;

    public AlertEntry? Open(string check)
    {
        foreach (var entry in standing)
            if (entry.Alert.Check == check) return entry;
        return null;
    }

    /// <summary>Id of an alert of this run: run, check and first seq.</summary>
    public string IdOf(string check, long seq) => FormattableString.Invariant($"{run}~{check}~{seq}");

    /// <summary>Opens or updates the alert of a finding.</summary>
    /// <param name="held">It waits for the verdict on the attempt.</param>
    public void Report(Finding finding, in Place at, bool held, List<Change> changes)
    {
        listed = null;
        if (Open(finding.Check) is { } open)
        {
            var again = open.LastOrdinal != at.Ordinal;
            open.Alert = open.Alert with { LastSeq = at.Seq, LastStep = at.Step, Text = finding.Text, Evidence = finding.Evidence, Severity = finding.Severity };
            open.Touch(at.Ordinal);
            if (again && !open.Held) changes.Add(new Change(ChangeKind.Alert, open.Alert.Id));
            return;
        }
        if (CheckIds.OncePerSettings(finding.Check) && !spoken.Add(finding.Check)) return;
        foreach (var earlier in entries)
            if (earlier.Alert.State == AlertState.Returned && earlier.Alert.Check == finding.Check) earlier.Alert = earlier.Alert with { State = AlertState.Closed };
        var entry = new AlertEntry(new Alert
        {
            Id = IdOf(finding.Check, at.Seq),
            Run = run,
            Check = finding.Check,
            Severity = finding.Severity,
            RaisedAt = at.Time,
            Step = at.Step,
            Iteration = at.Iteration,
            Seq = at.Seq,
            LastSeq = at.Seq,
            LastStep = at.Step,
            Text = finding.Text,
            Evidence = finding.Evidence,
        })
        { Held = held && !finding.Certain, Certain = finding.Certain, FirstOrdinal = at.Ordinal };
        entry.Touch(at.Ordinal);
        entries.Add(entry);
        standing.Add(entry);
        Trim();
        if (!entry.Held) changes.Add(new Change(ChangeKind.Alert, entry.Alert.Id));
    }

    /// <summary>Names the cause among the alerts that hold in the same step.</summary>
    public void Relate(long ordinal)
    {
        AlertEntry? cause = null;
        foreach (var entry in standing)
            if (entry.LastOrdinal == ordinal && CheckIds.Explains(entry.Alert.Check)
                && (cause is null || CheckIds.Rank(entry.Alert.Check) < CheckIds.Rank(cause.Alert.Check))) cause = entry;
        foreach (var entry in standing)
        {
            if (entry.LastOrdinal != ordinal) continue;
            var id = cause is null || cause == entry || !CheckIds.MayBeExplained(entry.Alert.Check) ? null : cause.Alert.Id;
            if (entry.Alert.Cause == id) continue;
            entry.Alert = entry.Alert with { Cause = id };
            listed = null;
        }
    }

    /// <summary>The verdict on an attempt: a rejected one takes the alerts raised inside it along; those already shown are closed.</summary>
    public void Settle(bool rejected, long ordinal, long seq, List<Change> changes)
    {
        for (var i = standing.Count - 1; i >= 0; i--)
        {
            var entry = standing[i];
            if (rejected && !entry.Held && !entry.Certain && entry.FirstOrdinal == ordinal) Close(entry, seq, changes);
            if (!entry.Held) continue;
            listed = null;
            if (rejected)
            {
                standing.RemoveAt(i);
                entries.Remove(entry);
                spoken.Remove(entry.Alert.Check);
                continue;
            }
            entry.Held = false;
            changes.Add(new Change(ChangeKind.Alert, entry.Alert.Id));
        }
    }

    /// <summary>A step converged: alerts whose condition did not hold in it come one step nearer to closing.</summary>
    public void StepConverged(long ordinal, long seq, List<Change> changes)
    {
        for (var i = standing.Count - 1; i >= 0; i--)
        {
            var entry = standing[i];
            if (entry.LastOrdinal == ordinal) continue;
            if (++entry.CleanSteps >= CleanSteps) Close(entry, seq, changes);
        }
    }

    /// <summary>An iteration of a steady run went by; <paramref name="reported"/> tells which checks spoke at it.</summary>
    public void SteadyIteration(List<Finding> reported, long seq, List<Change> changes)
    {
        for (var i = standing.Count - 1; i >= 0; i--)
        {
            var entry = standing[i];
            if (reported.Exists(f => f.Check == entry.Alert.Check)) continue;
            if (++entry.CleanIterations >= CleanIterations) Close(entry, seq, changes);
        }
    }

    /// <summary>The settings changed: what speaks once may speak again.</summary>
    public void SettingsChanged() => spoken.Clear();

    /// <summary>Changes an alert by id, such as when it is acknowledged; false when there is none.</summary>
    public bool Change(string id, Func<Alert, Alert> change)
    {
        var entry = entries.Find(e => e.Alert.Id == id);
        if (entry is null) return false;
        var changed = change(entry.Alert);
        if (ReferenceEquals(changed, entry.Alert)) return false;
        ShelvedCount += (changed.State == AlertState.Shelved ? 1 : 0) - (entry.Alert.State == AlertState.Shelved ? 1 : 0);
        entry.Alert = changed;
        listed = null;
        return true;
    }

    /// <summary>Sets what advice answers each alert.</summary>
    public void Answer(AlertEntry entry, IReadOnlyList<string> advice)
    {
        if (entry.Alert.Advice.SequenceEqual(advice)) return;
        entry.Alert = entry.Alert with { Advice = advice };
        listed = null;
    }

    private void Close(AlertEntry entry, long seq, List<Change> changes)
    {
        var state = entry.Alert.State switch
        {
            AlertState.Unacknowledged => AlertState.Returned,
            AlertState.Shelved => AlertState.Shelved,
            _ => AlertState.Closed,
        };
        entry.Alert = entry.Alert with { State = state, ClosedSeq = seq };
        listed = null;
        standing.Remove(entry);
        changes.Add(new Change(ChangeKind.Alert, entry.Alert.Id));
    }

    private void Trim()
    {
        if (entries.Count <= ClosedKept) return;
        var oldest = entries.FindIndex(e => !e.Standing);
        if (oldest < 0) return;
        if (entries[oldest].Alert.State == AlertState.Shelved) ShelvedCount--;
        entries.RemoveAt(oldest);
    }
}

/// <summary>One alert and what decides when it closes.</summary>
internal sealed class AlertEntry(Alert alert)
{
    public Alert Alert { get; set; } = alert;

    /// <summary>Waits for the verdict on the attempt it was raised in.</summary>
    public bool Held { get; set; }

    /// <summary>It stands whatever becomes of the attempt.</summary>
    public bool Certain { get; init; }

    /// <summary>The step or attempt it was raised in.</summary>
    public long FirstOrdinal { get; init; }

    /// <summary>Not closed and not returned.</summary>
    public bool Standing => Alert.ClosedSeq is null;

    /// <summary>The step or attempt at which the condition last held.</summary>
    public long LastOrdinal { get; private set; }

    public int CleanSteps { get; set; }

    public int CleanIterations { get; set; }

    public void Touch(long ordinal)
    {
        LastOrdinal = ordinal;
        CleanSteps = 0;
        CleanIterations = 0;
    }
}

/// <summary>Where in the stream something was found.</summary>
/// <param name="Ordinal">Of the step or attempt.</param>
internal readonly record struct Place(int Step, int Iteration, long Seq, DateTimeOffset? Time, long Ordinal);
