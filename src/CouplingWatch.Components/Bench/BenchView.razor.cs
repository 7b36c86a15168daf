using CouplingWatch.Components.Feed;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Layout;
using CouplingWatch.Components.Ledger;
using CouplingWatch.Components.Parts;
using CouplingWatch.Components.RunPage;
using CouplingWatch.Components.SettingsForm;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;

namespace CouplingWatch.Components.Bench;

/// <summary>The trial bench: try on the ledger, rehearse, race, publish, follow.</summary>
public sealed partial class BenchView : IDisposable
{
    private RunDetail? detail;
    private SettingsDraft? draft;
    private SecantLedger? ledger;
    private BasisView? tried;
    private RehearsalView? rehearsal;
    private CancellationTokenSource? rehearsing;
    private IDisposable? following;
    private string? followed, problem, rehearsalNote;
    private double done;
    private bool asked, busy;

    [Inject] private IWatchFeed Feed { get; set; } = default!;

    [Inject] private IServiceProvider Services { get; set; } = default!;

    [Inject] private LiveUpdates Live { get; set; } = default!;

    [Inject] private Viewer Viewer { get; set; } = default!;

    [Inject] private TimeProvider Time { get; set; } = default!;

    /// <summary>Name of the run.</summary>
    [Parameter] public string Run { get; set; } = "";

    private ITrialFeed? Trials => (ITrialFeed?)Services.GetService(typeof(ITrialFeed));

    private string RunHref => $"runs/{Uri.EscapeDataString(Run)}";

    private int Latest => detail is { Revisions.Count: > 0 } d ? d.Revisions[^1].Revision : 0;

    private CouplingSettings InForce =>
        detail!.Revisions.LastOrDefault(r => r.State is not (RevisionState.Refused or RevisionState.Withdrawn))?.Settings ?? detail.Settings;

    private IReadOnlyList<FilterRule> Rules => detail?.Basis is { Source: not "reported" } ? [FilterRule.OwnNorm, FilterRule.PivotRatio] : [];

    private bool CanRace => Trials is not null && CanPublish && !RaceGoesOn;

    private bool CanPublish => detail is { Summary.State: "live" or "quiet", Adjustable.IsEmpty: false };

    private bool RaceGoesOn => detail is { Race.State: RaceState.Waiting or RaceState.Running or RaceState.Watching };

    private string Where
    {
        get
        {
            var s = detail!.Summary;
            var pace = s.IterationsPerStep is { } n ? $", {Numbers.Fixed(n)} iterations a step with {SettingsWords.Of(detail.Settings)}" : "";
            return $"{Run}, step {Numbers.Count(Math.Max(0, s.Step))}{pace}. Holds for the recorded regime: a contact met later is unknown.";
        }
    }

    private Answer PublishAnswer => RaceGoesOn && detail!.Race is { } race
        ? new Answer(StateMark.NotJudged, $"{race.Id} takes turns on the run; nothing else can be published until it ends.")
        : draft!.Changes.Count == 0
            ? new Answer(StateMark.OnCourse, "Nothing is proposed yet.") { Notes = [$"Made from revision {draft.MadeFrom}. Should another revision come first, this one is refused and shown against it."] }
            : new Answer(StateMark.Dearer, "Old on the left, new on the right; the run takes it over between two steps.") { Notes = [$"Made from revision {draft.MadeFrom}. Should another revision come first, this one is refused and shown against it."] };

    protected override async Task OnParametersSetAsync()
    {
        if (followed == Run) return;
        followed = Run;
        rehearsing?.Cancel();
        (asked, draft, tried, rehearsal, rehearsalNote) = (false, null, null, null, null);
        detail = await Feed.RunAsync(Run);
        asked = true;
        Begin();
        following?.Dispose();
        following = RendererInfo.IsInteractive ? Live.Follow(Run, () => InvokeAsync(RefreshAsync)) : null;
    }

    public void Dispose()
    {
        following?.Dispose();
        rehearsing?.Cancel();
        rehearsing?.Dispose();
    }

    private void Begin()
    {
        if (detail is not null && draft is null) draft = new SettingsDraft(InForce, detail.Adjustable, Latest);
    }

    private async Task RefreshAsync()
    {
        var fresh = await Feed.RunAsync(Run);
        if (ReferenceEquals(fresh, detail)) return;
        detail = fresh;
        Begin();
        if (draft is { Changes.Count: 0 } && detail is not null && draft.MadeFrom != Latest) draft = draft.From(InForce, Latest);
        StateHasChanged();
    }

    /// <summary>A dial was turned: the ledger answers at once where the filter changed.</summary>
    private async Task TurnedAsync()
    {
        if (ledger is null || detail?.Basis is not { } basis || draft is null) return;
        var rule = draft.Change?.FilterRule ?? draft.InForce.FilterRule ?? basis.Rule;
        var threshold = draft.Change?.FilterThreshold ?? draft.InForce.FilterThreshold ?? basis.Threshold;
        if (Rules.Contains(rule)) await ledger.TryAsync(rule, threshold);
    }

    /// <summary>The line of the ledger was moved: the dials follow.</summary>
    private void Tried(TriedFilter? filter)
    {
        if (draft is null) return;
        if (filter is null)
        {
            tried = null;
            draft.Type(SettingKind.Named("filterRule")!, SettingKind.Named("filterRule")!.Get(draft.InForce) ?? "");
            draft.Type(SettingKind.Named("filterThreshold")!, SettingKind.Named("filterThreshold")!.Get(draft.InForce) ?? "");
            return;
        }
        if (SettingKind.Read(draft.Text(SettingKind.Named("filterThreshold")!)) != filter.Threshold) draft.Type(SettingKind.Named("filterThreshold")!, SettingKind.Plain(filter.Threshold));
        draft.Type(SettingKind.Named("filterRule")!, LedgerRows.Named(filter.Rule));
    }

    private async Task<BasisView?> AskAsync(FilterRule rule, double threshold, CancellationToken cancel)
    {
        var answer = await Feed.BasisAsync(Run, detail?.Basis?.Step, detail?.Basis?.Iteration, rule, threshold, cancel);
        if (!cancel.IsCancellationRequested)
        {
            tried = answer;
            StateHasChanged();
        }
        return answer;
    }

    private async Task ClearAsync()
    {
        draft!.Clear();
        tried = null;
        await TurnedAsync();
    }

    private async Task TakeAsync(CouplingSettings settings)
    {
        draft!.Clear();
        draft.Take(settings);
        if (draft.Reason.Length == 0) draft.Reason = "rehearsed: " + SettingsWords.Of(settings);
        await TurnedAsync();
    }

    private async Task RehearseAsync(IReadOnlyList<CouplingSettings>? candidates)
    {
        if (Trials is not { } trials || rehearsing is not null) return;
        using var cancel = rehearsing = new CancellationTokenSource();
        (done, rehearsalNote) = (0, "rehearsing …");
        var step = detail?.Summary.Step;
        var shown = 0.0;
        var progress = new Progress<double>(share =>
        {
            if (share - Volatile.Read(ref shown) < 0.05) return;
            Volatile.Write(ref shown, share);
            _ = InvokeAsync(() =>
            {
                done = share;
                StateHasChanged();
            });
        });
        try
        {
            rehearsal = await trials.RehearseAsync(Run, candidates, progress, cancel.Token);
            rehearsalNote = rehearsal is null ? "there is no such run any more" : $"rehearsed at step {step}";
        }
        catch (OperationCanceledException)
        {
            rehearsalNote = "cancelled";
        }
        finally
        {
            rehearsing = null;
        }
    }

    private async Task<string?> StartRaceAsync(RaceProposal proposal)
    {
        var outcome = await Trials!.StartRaceAsync(Run, proposal);
        await RefreshAsync();
        return outcome.Problem;
    }

    private async Task<string?> StopRaceAsync(string race)
    {
        var problemToStop = await Trials!.StopRaceAsync(Run, race);
        await RefreshAsync();
        return problemToStop;
    }

    private async Task PublishAsync()
    {
        if (busy || draft is null || draft.Hindrance is not null) return;
        busy = true;
        problem = null;
        try
        {
            var outcome = await Feed.PublishAsync(Run, draft.Proposal(), draft.MadeFrom);
            problem = outcome.Problem;
            if (outcome.Revision is null) return;
            draft.Clear();
            draft.Reason = "";
            await RefreshAsync();
        }
        finally
        {
            busy = false;
        }
    }

    private void Rebase() => draft = draft!.From(InForce, Latest);
}
