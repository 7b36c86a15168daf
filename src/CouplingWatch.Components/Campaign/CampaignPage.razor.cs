using CouplingWatch.Components.Feed;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Layout;
using Microsoft.AspNetCore.Components;

namespace CouplingWatch.Components.Campaign;

/// <summary>"What have we learnt?" The runs of a campaign side by side. Refreshed at most once in five seconds: nothing here is urgent.</summary>
public sealed partial class CampaignPage : IDisposable
{
    private IReadOnlyList<string> names = [];
    private CampaignView view = CampaignView.Of([]);
    private string? shown;
    private string axis = SettingAxis.All[0].Key;
    private bool loaded;
    private IDisposable? following;

    /// <summary>The campaign; without one, that of the newest record.</summary>
    [Parameter] public string? Name { get; set; }

    [Inject] private IWatchFeed Feed { get; set; } = null!;
    [Inject] private LiveUpdates Live { get; set; } = null!;

    private IReadOnlyList<CampaignRun> Compared => [.. view.Runs.Where(r => r.Summary.Scheme == view.Scheme)];

    protected override Task OnParametersSetAsync() => ReadAsync();

    protected override void OnAfterRender(bool firstRender)
    {
        if (firstRender) following = Live.Follow(null, () => InvokeAsync(RefreshAsync), TimeSpan.FromSeconds(5));
    }

    private async Task RefreshAsync()
    {
        await ReadAsync();
        StateHasChanged();
    }

    private async Task ReadAsync()
    {
        var board = (await Feed.BoardAsync()).Where(r => !string.IsNullOrEmpty(r.Campaign)).ToList();
        names = [.. board.Select(r => r.Campaign!).Distinct().Order(StringComparer.Ordinal)];
        shown = Name is null ? board.MaxBy(r => r.LastRecordAt)?.Campaign : names.FirstOrDefault(n => n == Name);
        var runs = new List<CampaignRun>();
        foreach (var summary in board.Where(r => r.Campaign == shown))
            if (await Feed.RunAsync(summary.Run) is { } detail) runs.Add(CampaignRun.Of(detail));
        view = CampaignView.Of(runs);
        loaded = true;
    }

    private static string Href(CampaignRun run) => $"runs/{Uri.EscapeDataString(run.Name)}";

    private string P(double iterations) => Numbers.Plain(112 * iterations / Math.Max(1, view.Runs.Max(r => r.High ?? 0)));

    public void Dispose() => following?.Dispose();
}
