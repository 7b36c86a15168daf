using System.Globalization;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;
using Microsoft.AspNetCore.Components.Web;

namespace CouplingWatch.Components.Parts;

/// <summary>The step strip: one bar a step or a group of steps, never more than <see cref="StripDrawing.MostBars"/>.</summary>
public partial class StepStrip
{
    private IReadOnlyList<StripBar>? drawnFrom;
    private StripDrawing drawing = StripDrawing.Of([]);
    private IReadOnlyList<StripBar> bars = [];
    private int? chosen;

    /// <summary>Name of the run, for the label of the slider.</summary>
    [Parameter, EditorRequired] public string Run { get; set; } = "";

    [Parameter, EditorRequired] public IReadOnlyList<StripBar> Bars { get; set; } = [];

    /// <summary>Passes of the step in progress, drawn instead of bars while no step is complete.</summary>
    [Parameter] public IReadOnlyList<PassPair> Passes { get; set; } = [];

    /// <summary>The step in progress, named on the axis while no step is complete.</summary>
    [Parameter] public int Step { get; set; }

    /// <summary>40 px high rather than 60.</summary>
    [Parameter] public bool Calm { get; set; }

    /// <summary>The first step is drawn as diverging.</summary>
    [Parameter] public bool Diverging { get; set; }

    /// <summary>The first step that was complete after the reader last looked; draws the dotted upright.</summary>
    [Parameter] public int? LookedAtStep { get; set; }

    /// <summary>Enter on a bar: open that step.</summary>
    [Parameter] public EventCallback<StripBar> OnOpen { get; set; }

    protected override void OnParametersSet()
    {
        if (ReferenceEquals(drawnFrom, Bars)) return;
        var follows = chosen is { } c && c == bars.Count - 1;
        drawnFrom = Bars;
        drawing = StripDrawing.Of(Bars);
        bars = drawing.Bars;
        if (chosen is { } at) chosen = bars.Count == 0 ? null : follows ? bars.Count - 1 : Math.Min(at, bars.Count - 1);
    }

    /// <summary>Wide bars only for young runs; from some 40 steps on the strip keeps its width and the bars get thinner.</summary>
    internal int Pixels
    {
        get
        {
            var count = bars.Count > 0 ? bars.Count : Math.Max(1, Passes.Count);
            return Math.Clamp(count * (count <= 14 ? 24 : count <= 38 ? 19 : Math.Max(3, 744 / count)), 90, 900);
        }
    }

    private int? LookedX
    {
        get
        {
            if (LookedAtStep is not { } step || bars.Count == 0 || step <= bars[0].FromStep || step > bars[^1].ToStep) return null;
            for (var i = 0; i < bars.Count; i++)
                if (bars[i].ToStep >= step) return i * 10;
            return null;
        }
    }

    private void Walk(ChangeEventArgs e)
    {
        if (int.TryParse(e.Value?.ToString(), NumberStyles.Integer, CultureInfo.InvariantCulture, out var at)) chosen = Math.Clamp(at, 0, bars.Count - 1);
    }

    private void Leave() => chosen = null;

    private Task Key(KeyboardEventArgs e) => e.Key == "Enter" && bars.Count > 0 ? OnOpen.InvokeAsync(bars[chosen ?? bars.Count - 1]) : Task.CompletedTask;
}
