using System.Globalization;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.State;

/// <summary>The settings revisions of a run: published, picked up, applied or refused, and what the iterations did before and after.</summary>
internal sealed class SettingsBook
{
    public const int Kept = 500;

    /// <summary>Steps under a revision before its effect is told.</summary>
    public const int LeastStepsAfter = 4;

    /// <summary>Steps after which the effect is no longer updated.</summary>
    public const int MostStepsAfter = 30;

    private readonly List<SettingsRevision> revisions = [];
    private IReadOnlyList<SettingsRevision>? listed;
    private (int Revision, double Before, int StepsBefore) measured = (-1, 0, 0);
    private double sumAfter;
    private int stepsAfter;

    public IReadOnlyList<SettingsRevision> All => listed ??= [.. revisions];

    /// <summary>An applied revision that waits for its first step.</summary>
    public AppliedRecord? Pending { get; private set; }

    public void Open(OpenRecord open) => Add(new SettingsRevision { Revision = 0, Settings = open.Settings, At = open.At, State = RevisionState.Applied, FromStep = open.Continues?.Step });

    public void Published(PublishedEvent e) => Add(new SettingsRevision
    {
        Revision = e.Revision,
        Settings = Newest.With(e.Settings),
        Commands = e.Commands,
        Changes = Differences(Newest, e.Settings),
        By = e.By,
        At = e.At,
        Reason = e.Reason,
        State = RevisionState.Published,
    });

    public void PickedUp(int revision) => Change(revision, r => r.State == RevisionState.Published ? r with { State = RevisionState.PickedUp } : r);

    public void Applied(AppliedRecord record)
    {
        if (record.Settings is not { } settings)
        {
            Note(record, r => r with { State = RevisionState.Refused, Refused = record.Refused ?? "refused", FromStep = record.FromStep });
            return;
        }
        Note(record, r => r with { State = RevisionState.Applied, FromStep = record.FromStep, Settings = settings, Changes = r.Changes.Count > 0 ? r.Changes : Differences(Before(record.Revision), settings) });
        for (var i = 0; i < revisions.Count; i++)
            if (revisions[i].Revision < record.Revision && revisions[i].State is RevisionState.Published or RevisionState.PickedUp)
                revisions[i] = revisions[i] with { State = RevisionState.Withdrawn };
        Pending = record;
    }

    public void InForce(int revision, double before, int stepsBefore)
    {
        Pending = null;
        measured = (revision, before, stepsBefore);
        sumAfter = 0;
        stepsAfter = 0;
    }

    /// <summary>The revision came with the command to drop the history.</summary>
    public bool Drops(int revision) => revisions.Exists(r => r.Revision == revision && r.Commands.Contains("dropHistory"));

    /// <summary>A complete step ran under the revision in force.</summary>
    public void StepDone(int iterations)
    {
        if (measured.Revision < 0 || measured.StepsBefore == 0 || stepsAfter >= MostStepsAfter) return;
        sumAfter += iterations;
        if (++stepsAfter < LeastStepsAfter) return;
        var effect = new RevisionEffect(measured.Before, measured.StepsBefore, sumAfter / stepsAfter, stepsAfter);
        Change(measured.Revision, r => r with { Effect = effect });
    }

    /// <summary>What differs between two sets of settings, one line a setting, in the order of the stream's members.</summary>
    public static IReadOnlyList<SettingChange> Differences(CouplingSettings from, CouplingSettings to)
    {
        List<SettingChange> changes = [];
        Compare("method", from.Method is { } m ? Say.Method(m) : null, to.Method is { } n ? Say.Method(n) : null);
        Compare("relaxation", Text(from.Relaxation), Text(to.Relaxation));
        Compare("historySteps", Text(from.HistorySteps), Text(to.HistorySteps));
        Compare("filterRule", from.FilterRule is { } f ? Say.Rule(f) : null, to.FilterRule is { } t ? Say.Rule(t) : null);
        Compare("filterThreshold", Text(from.FilterThreshold), Text(to.FilterThreshold));
        Compare("iterationCap", Text(from.IterationCap), Text(to.IterationCap), "result");
        Compare("predictorOrder", Text(from.PredictorOrder), Text(to.PredictorOrder));
        Compare("tolerance", Text(from.Tolerance), Text(to.Tolerance), "result");
        Compare("surrogate", from.Surrogate, to.Surrogate);
        return changes;

        void Compare(string setting, string? old, string? now, string alters = "cost")
        {
            if (now is not null && old != now) changes.Add(new SettingChange(setting, old ?? "", now, alters));
        }
    }

    private CouplingSettings Newest => revisions.Count == 0 ? new CouplingSettings() : revisions[^1].Settings;

    private CouplingSettings Before(int revision)
    {
        for (var i = revisions.Count - 1; i >= 0; i--)
            if (revisions[i].Revision < revision && revisions[i].State == RevisionState.Applied) return revisions[i].Settings;
        return new CouplingSettings();
    }

    private static string? Text(double? value) => value?.ToString("R", CultureInfo.InvariantCulture);

    private static string? Text(int? value) => value?.ToString(CultureInfo.InvariantCulture);

    private void Note(AppliedRecord record, Func<SettingsRevision, SettingsRevision> change)
    {
        if (revisions.TrueForAll(r => r.Revision != record.Revision))
            Add(new SettingsRevision { Revision = record.Revision, Settings = record.Settings ?? Newest, At = record.At, State = RevisionState.Published });
        Change(record.Revision, change);
    }

    private void Add(SettingsRevision revision)
    {
        listed = null;
        revisions.RemoveAll(r => r.Revision == revision.Revision);
        revisions.Add(revision);
        if (revisions.Count > Kept) revisions.RemoveAt(1);
    }

    private void Change(int revision, Func<SettingsRevision, SettingsRevision> change)
    {
        var at = revisions.FindIndex(r => r.Revision == revision);
        if (at < 0) return;
        revisions[at] = change(revisions[at]);
        listed = null;
    }
}
