using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;

namespace CouplingWatch.Components.Alerts;

/// <summary>One alert with what it explains.</summary>
public partial class AlertItem
{
    private bool shelving;

    [Parameter, EditorRequired] public Alert Alert { get; set; } = null!;

    [Parameter] public IReadOnlyList<Alert> AlsoSeen { get; set; } = [];

    [Parameter] public RunSummary? Run { get; set; }

    [Parameter] public IReadOnlyList<Advice> Advice { get; set; } = [];

    [Parameter] public IReadOnlyList<IterationView>? Iterations { get; set; }

    [Parameter, EditorRequired] public DateTimeOffset Now { get; set; }

    [Parameter] public TimeZoneInfo? Zone { get; set; }

    /// <summary>Why the last act was not done; null when it was.</summary>
    [Parameter] public string? Problem { get; set; }

    [Parameter] public EventCallback<Alert> OnAcknowledge { get; set; }

    [Parameter] public EventCallback<(Alert Alert, Shelf Shelf)> OnShelve { get; set; }

    [Parameter] public EventCallback<Alert> OnUnshelve { get; set; }

    private string Id => "alert-" + Alert.Id;

    private string Href => $"runs/{Uri.EscapeDataString(Alert.Run)}";

    private IReadOnlyList<(string Name, string Value)> Evidence => EvidenceWords.Of(Alert.Evidence);

    private async Task ShelveAsync(Shelf shelf)
    {
        await OnShelve.InvokeAsync((Alert, shelf));
        shelving = false;
    }
}
