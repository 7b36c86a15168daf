using CouplingWatch.Components.Feed;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Layout;
using CouplingWatch.Components.Ledger;
using CouplingWatch.Components.SettingsForm;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;

namespace CouplingWatch.Components.RunPage;

/// <summary>The run page: header, settings, five questions, log. Refreshed at most four times a second, not while paused or hidden.</summary>
public sealed partial class RunView : IDisposable
{
    private static readonly string[] RitzColumns = ["no.", "real part", "imaginary part", "tamed"];
    private RunDetail? detail;
    private SecantLedger? ledger;
    private IDisposable? following;
    private string? followed;
    private bool asked, editing;
    private Action<SettingsDraft>? start;
    private int? openStep;
    private IReadOnlyList<IterationView> iterations = [];

    [Inject] private IWatchFeed Feed { get; set; } = default!;

    [Inject] private LiveUpdates Live { get; set; } = default!;

    [Inject] private Viewer Viewer { get; set; } = default!;

    [Inject] private TimeProvider Time { get; set; } = default!;

    /// <summary>Name of the run.</summary>
    [Parameter] public string Run { get; set; } = "";

    private string Title => detail is { } d ? $"{Run}: {d.Summary.Verdict.Word}" : Run;

    private int Latest => detail is { Revisions.Count: > 0 } d ? d.Revisions[^1].Revision : 0;

    private bool CanChange => detail is { Adjustable.IsEmpty: false, Summary.State: "live" or "quiet" };

    private IReadOnlyList<FilterRule> TriedRules =>
        detail?.Basis is not { Source: not "reported" } basis ? []
        : basis.Rule is FilterRule.OwnNorm or FilterRule.PivotRatio ? [FilterRule.OwnNorm, FilterRule.PivotRatio] : [basis.Rule, FilterRule.OwnNorm, FilterRule.PivotRatio];

    protected override async Task OnParametersSetAsync()
    {
        if (followed == Run) return;
        followed = Run;
        (editing, openStep, asked) = (false, null, false);
        detail = await Feed.RunAsync(Run);
        asked = true;
        following?.Dispose();
        following = RendererInfo.IsInteractive ? Live.Follow(Run, () => InvokeAsync(RefreshAsync)) : null;
    }

    public void Dispose() => following?.Dispose();

    private async Task RefreshAsync()
    {
        var fresh = await Feed.RunAsync(Run);
        if (ReferenceEquals(fresh, detail)) return;
        detail = fresh;
        StateHasChanged();
    }

    private Task<BasisView?> AskAsync(FilterRule rule, double threshold, CancellationToken cancel) =>
        Feed.BasisAsync(Run, detail?.Basis?.Step, detail?.Basis?.Iteration, rule, threshold, cancel);

    private void Advise(Advice advice) => Open(draft => AdvisedChange.Into(draft, advice));

    private void Change() => Open(_ => { });

    private void Propose(TriedFilter tried) => Open(draft =>
    {
        if (draft.Adjustable.Allows("filterRule")) draft.Type(SettingKind.Named("filterRule")!, LedgerRows.Named(tried.Rule));
        if (draft.Adjustable.Allows("filterThreshold")) draft.Type(SettingKind.Named("filterThreshold")!, ThresholdText.Typed(tried.Threshold));
    });

    private void Open(Action<SettingsDraft> with)
    {
        start = with;
        editing = true;
    }

    private void Close() => editing = false;

    private async Task PublishedAsync(int revision)
    {
        editing = false;
        await RefreshAsync();
    }

    private async Task OpenStepAsync(StripBar bar)
    {
        openStep = bar.ToStep;
        iterations = await Feed.IterationsAsync(Run, bar.ToStep);
    }

    private static IReadOnlyList<IReadOnlyList<string>> RitzRows(SpectrumView view) =>
        [.. view.Values.Select((v, i) => new[] { Numbers.Count(i + 1), Numbers.Sig(v.Real, 6), Numbers.Sig(v.Imaginary, 6), v.Tamed ? "yes" : "no" })];
}
