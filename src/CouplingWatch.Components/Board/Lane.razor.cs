using CouplingWatch.Components.Parts;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;

namespace CouplingWatch.Components.Board;

/// <summary>A lane of the board. It is drawn again only when something it shows has changed.</summary>
public partial class Lane
{
    private Shown? shown;
    private bool changed;

    [Parameter, EditorRequired] public RunSummary Run { get; set; } = null!;

    /// <summary>Now, to the minute: the left end of the clock.</summary>
    [Parameter, EditorRequired] public DateTimeOffset Now { get; set; }

    [Parameter] public bool Calm { get; set; }

    [Parameter] public TimeZoneInfo? Zone { get; set; }

    [Parameter] public int? LookedAtStep { get; set; }

    [Inject] private NavigationManager Navigation { get; set; } = null!;

    private StateMark Mark => StateMarks.Of(Run.Verdict);

    private string Href => $"runs/{Uri.EscapeDataString(Run.Run)}";

    private string Id => "lane-" + Run.Run;

    private bool Closed => LaneOrder.Closed(Run);

    private int Height => Calm ? 40 : 60;

    private (string Lead, string Tail) End => LaneWords.End(Run, Now, Zone);

    /// <summary>The passes matter to the strip only while it has no bar.</summary>
    private IReadOnlyList<PassPair> FirstStepPasses => Run.Strip.Count == 0 ? Run.Passes : [];

    protected override void OnParametersSet()
    {
        var next = new Shown(Run.NextSeq, Run.State, Run.Verdict, Run.Next?.Id, Run.NodeHoursAtStake, Run.Revision, Run.Forecast, Now, Calm, LookedAtStep, Zone);
        changed = next != shown;
        shown = next;
    }

    protected override bool ShouldRender() => changed;

    private void Open(StripBar bar) => Navigation.NavigateTo($"{Href}?step={bar.ToStep}");

    private sealed record Shown(long NextSeq, string State, Verdict Verdict, string? Next, double? Stake, int Revision, RunForecast? Forecast, DateTimeOffset Now, bool Calm, int? Looked, TimeZoneInfo? Zone);
}
