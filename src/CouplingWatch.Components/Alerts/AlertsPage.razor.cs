using CouplingWatch.Components.Feed;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Layout;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;

namespace CouplingWatch.Components.Alerts;

/// <summary>"What is wrong, and who has it?" One list, grouped by cause, in an order that is settled when the page opens and when asked.</summary>
public sealed partial class AlertsPage : IDisposable
{
    private readonly List<StateFilter> filters =
    [
        new("unacknowledged", true, s => s is AlertState.Unacknowledged or AlertState.Returned),
        new("acknowledged", true, s => s == AlertState.Acknowledged),
        new("shelved", true, s => s == AlertState.Shelved),
        new("closed", false, s => s == AlertState.Closed),
    ];

    private readonly Dictionary<string, int> places = [];
    private readonly Dictionary<string, string> problems = [];
    private readonly Dictionary<string, KeptIterations> iterations = [];
    private readonly Dictionary<string, (string Key, IReadOnlyList<Advice> Advice)> advice = [];
    private IReadOnlyList<Alert> alerts = [];
    private IReadOnlyList<AlertGroup> groups = [];
    private Dictionary<string, RunSummary> runs = [];
    private IDisposable? following;
    private DateTimeOffset now;
    private bool stale;

    [Inject] private IWatchFeed Feed { get; set; } = null!;
    [Inject] private LiveUpdates Live { get; set; } = null!;
    [Inject] private Viewer Viewer { get; set; } = null!;
    [Inject] private TimeProvider Time { get; set; } = null!;

    private string Title => alerts.Count(a => a.State == AlertState.Unacknowledged) is var n and > 0 ? $"{Numbers.Count(n)} unacknowledged · Alerts · CouplingWatch" : "Alerts · CouplingWatch";

    /// <summary>Closed ones are many: only the newest hundred are drawn.</summary>
    private IReadOnlyList<AlertGroup> Shown => [.. groups.Where(g => filters.Any(f => f.On && f.Takes(g.Head.State))).Take(100)];

    protected override async Task OnInitializedAsync()
    {
        await ReadAsync();
        Settle();
    }

    protected override async Task OnAfterRenderAsync(bool firstRender)
    {
        if (!firstRender) return;
        Viewer.Changed += Redraw;
        following = Live.Follow(null, () => InvokeAsync(RefreshAsync), TimeSpan.FromSeconds(1));
        await ReadBehindAsync();
        StateHasChanged();
    }

    private async Task RefreshAsync()
    {
        await ReadAsync();
        Arrange();
        await ReadBehindAsync();
        StateHasChanged();
    }

    private async Task ReadAsync()
    {
        now = Time.GetUtcNow();
        alerts = await Feed.AlertsAsync();
        runs = (await Feed.BoardAsync()).ToDictionary(r => r.Run, StringComparer.Ordinal);
    }

    private void Settle()
    {
        places.Clear();
        Arrange();
    }

    private void Arrange()
    {
        var grouped = AlertGroups.Of(alerts);
        foreach (var group in grouped) places.TryAdd(group.Head.Id, places.Count);
        groups = [.. grouped.OrderBy(g => places[g.Head.Id])];
        stale = !groups.Select(g => g.Head.Id).SequenceEqual(grouped.Select(g => g.Head.Id));
    }

    /// <summary>Reads what stands behind the alerts shown: their iterations and advice, each only when the alert has moved on.</summary>
    private async Task ReadBehindAsync()
    {
        foreach (var group in Shown)
        {
            var head = group.Head;
            if (iterations.GetValueOrDefault(head.Id) is not { } kept || kept.LastSeq != head.LastSeq)
            {
                iterations[head.Id] = new(head.LastSeq, await LatestIterationsAsync(head));
                StateHasChanged();
            }
            var ids = string.Join(' ', head.Advice.Concat(group.AlsoSeen.SelectMany(a => a.Advice)));
            if (ids.Length == 0 || (advice.TryGetValue(head.Id, out var known) && known.Key == ids)) continue;
            var all = await Feed.RunAsync(head.Run) is { } detail ? detail.Advice : [];
            advice[head.Id] = (ids, [.. all.Where(a => ids.Split(' ').Contains(a.Id))]);
        }
    }

    /// <summary>The step the alert last held in while it stands, else the one that raised it.</summary>
    private async Task<IReadOnlyList<IterationView>> LatestIterationsAsync(Alert alert)
    {
        if (AlertGroups.Open(alert) && alert.LastStep != alert.Step && await Feed.IterationsAsync(alert.Run, alert.LastStep) is { Count: > 0 } latest) return latest;
        return await Feed.IterationsAsync(alert.Run, alert.Step);
    }

    private RunSummary? RunOf(Alert alert) => runs.GetValueOrDefault(alert.Run);

    private IReadOnlyList<Advice> AdviceOf(AlertGroup group) =>
        advice.TryGetValue(group.Head.Id, out var known) && known.Advice.Count > 0 ? known.Advice
        : RunOf(group.Head)?.Next is { } next && (next.Because.Count == 0 || next.Because.Contains(group.Head.Id)) ? [next] : [];

    private Task AcknowledgeAsync(Alert alert) => ActAsync(alert, async () => await Feed.AcknowledgeAsync(alert.Id) ? null : "It could not be acknowledged: it is closed, or the server did not take it.");

    private Task ShelveAsync((Alert Alert, Shelf Shelf) it) => ActAsync(it.Alert, () => Feed.ShelveAsync(it.Alert.Id, it.Shelf.Minutes, it.Shelf.Reason));

    private Task UnshelveAsync(Alert alert) => ActAsync(alert, () => Feed.UnshelveAsync(alert.Id));

    private async Task ActAsync(Alert alert, Func<Task<string?>> act)
    {
        problems.Remove(alert.Id);
        if (await act() is { } problem) problems[alert.Id] = problem;
        await RefreshAsync();
    }

    private void Redraw() => _ = InvokeAsync(StateHasChanged);

    public void Dispose()
    {
        Viewer.Changed -= Redraw;
        following?.Dispose();
    }

    private sealed record KeptIterations(long LastSeq, IReadOnlyList<IterationView> Items);

    private sealed class StateFilter(string word, bool on, Func<AlertState, bool> takes)
    {
        public string Word => word;
        public bool On { get; set; } = on;
        public bool Takes(AlertState state) => takes(state);
    }
}
