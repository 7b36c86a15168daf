using CouplingWatch.Components.Feed;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Layout;
using CouplingWatch.Components.Parts;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;

namespace CouplingWatch.Components.Board;

/// <summary>"Which run needs me?" Lanes in a settled order, refreshed at most four times a second.</summary>
public sealed partial class BoardPage : IDisposable
{
    private readonly LaneOrder order = new();
    private readonly Dictionary<string, string> codes = [];
    private IReadOnlyList<RunSummary>? shown;
    private IReadOnlyList<Happening> happenings = [];
    private IDisposable? following;
    private ITimer? minutes;
    private DateTimeOffset now;
    private bool stale;
    private string announced = "";

    [Inject] private IWatchFeed Feed { get; set; } = null!;
    [Inject] private LiveUpdates Live { get; set; } = null!;
    [Inject] private Viewer Viewer { get; set; } = null!;
    [Inject] private TimeProvider Time { get; set; } = null!;

    private string Title
    {
        get
        {
            var asking = shown?.Count(r => !LaneOrder.Closed(r) && StateMarks.Asks(StateMarks.Of(r.Verdict))) ?? 0;
            return asking == 0 ? "Board · CouplingWatch" : $"{Numbers.Count(asking)} asking · Board · CouplingWatch";
        }
    }

    private string Count
    {
        get
        {
            var campaigns = shown!.Select(r => r.Campaign).Where(c => !string.IsNullOrEmpty(c)).Distinct().Count();
            var word = Numbers.Word(shown!.Count);
            var runs = $"{char.ToUpperInvariant(word[0])}{word[1..]} {(shown.Count == 1 ? "run" : "runs")}";
            return campaigns > 1 ? $"{runs} in {Numbers.Word(campaigns)} campaigns." : runs + ".";
        }
    }

    protected override async Task OnInitializedAsync()
    {
        now = Minute();
        var runs = await Feed.BoardAsync();
        order.Settle(runs);
        Take(runs);
    }

    protected override async Task OnAfterRenderAsync(bool firstRender)
    {
        if (!firstRender) return;
        Viewer.Changed += LearnViewer;
        following = Live.Follow(null, () => InvokeAsync(RefreshAsync));
        minutes = Time.CreateTimer(_ => _ = InvokeAsync(Tick), null, TimeSpan.FromSeconds(10), TimeSpan.FromSeconds(10));
        if (Viewer.Known) await TellAsync();
    }

    private async Task RefreshAsync()
    {
        now = Minute();
        Take(await Feed.BoardAsync());
        StateHasChanged();
    }

    private void Take(IReadOnlyList<RunSummary> runs)
    {
        if (shown is { Count: 0 } && runs.Count > 0) order.Settle(runs);
        stale = order.IsStale(runs);
        shown = order.Apply(runs);
        foreach (var run in shown)
        {
            if (codes.TryGetValue(run.Run, out var code) && code != run.Verdict.Code) announced = $"{run.Run}: {run.Verdict.Word}.";
            codes[run.Run] = run.Verdict.Code;
        }
    }

    private void Settle()
    {
        if (shown is null) return;
        order.Settle(shown);
        Take(shown);
    }

    private void Tick()
    {
        if (Live.Held || Minute() == now) return;
        now = Minute();
        StateHasChanged();
    }

    private void LearnViewer() => _ = InvokeAsync(TellAsync);

    private async Task TellAsync()
    {
        if (Viewer.LookedAt is { } looked && shown is { } runs)
            happenings = SinceLooked.Of(runs, await Feed.AlertsAsync(), looked, Time.GetUtcNow(), Viewer.Zone);
        StateHasChanged();
    }

    private DateTimeOffset Minute()
    {
        var at = Time.GetUtcNow();
        return new DateTimeOffset(at.UtcTicks - at.UtcTicks % TimeSpan.TicksPerMinute, TimeSpan.Zero);
    }

    public void Dispose()
    {
        Viewer.Changed -= LearnViewer;
        following?.Dispose();
        minutes?.Dispose();
    }
}
