using Microsoft.AspNetCore.Components;
using Microsoft.AspNetCore.Components.Web;
using Microsoft.JSInterop;

namespace CouplingWatch.Components.Charts;

/// <summary>A line plot: the one place that knows the chart library. The script redraws at most four times a second a page and never in a hidden tab.</summary>
public sealed partial class LineChart
{
    private ElementReference place;
    private IJSObjectReference? script;
    private string? shown;
    private int? cursor;
    private string? reading;

    [Parameter, EditorRequired] public LineChartSpec Spec { get; set; } = default!;

    /// <summary>The plot in words, for those who do not see it.</summary>
    [Parameter, EditorRequired] public string Label { get; set; } = "";

    /// <summary>What the arrow keys walk: "iterations".</summary>
    [Parameter] public string Of { get; set; } = "points";

    /// <summary>What the upright axis shows.</summary>
    [Parameter] public string? YName { get; set; }

    /// <summary>What the lying axis shows.</summary>
    [Parameter] public string? XName { get; set; }

    /// <summary>Which series the arrow keys walk.</summary>
    [Parameter] public SeriesRole Walks { get; set; } = SeriesRole.Path;

    private string Walk => $"Left and right walk the {Of}";

    private IReadOnlyList<ChartPoint> Steps => Spec.Series.FirstOrDefault(s => s.Role == Walks)?.Points ?? [];

    protected override async Task OnAfterRenderAsync(bool firstRender)
    {
        var spec = cursor is { } at && at < Steps.Count
            ? Spec with { Rules = [.. Spec.Rules, new ChartRule(RuleRole.Cursor, Steps[at].X)] }
            : Spec;
        var text = spec.ToJson();
        if (text == shown) return;
        shown = text;
        try
        {
            script ??= await JS.InvokeAsync<IJSObjectReference>("import", "./js/line-chart.js");
            await script.InvokeVoidAsync("show", place, text);
        }
        catch (JSDisconnectedException)
        {
            // The page is gone; there is nothing to draw on.
        }
    }

    private void OnKey(KeyboardEventArgs key)
    {
        var last = Steps.Count - 1;
        if (last < 0) return;
        int? to = key.Key switch
        {
            "ArrowLeft" => Math.Max(0, (cursor ?? last + 1) - 1),
            "ArrowRight" => Math.Min(last, (cursor ?? -1) + 1),
            "Home" => 0,
            "End" => last,
            _ => null,
        };
        if (key.Key == "Escape") Leave();
        if (to is not { } next) return;
        cursor = next;
        reading = Steps[next].Text;
    }

    private void Leave()
    {
        cursor = null;
        reading = null;
    }

    public async ValueTask DisposeAsync()
    {
        if (script is null) return;
        try
        {
            await script.InvokeVoidAsync("remove", place);
            await script.DisposeAsync();
        }
        catch (JSDisconnectedException)
        {
            // The browser has already let go of it.
        }
    }
}
