using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Campaign;

/// <summary>A dot of the plot: where on the axis, how many iterations a step, the whiskers, the name.</summary>
public sealed record SettingDot(double X, double Mean, double Low, double High, string Name, string Value, bool QuasiNewton);

/// <summary>Iterations a step against one setting. Numbers stand to scale (the threshold by decades), words side by side. Pure.</summary>
public sealed record SettingAxis(string Key, string Word)
{
    public static readonly IReadOnlyList<SettingAxis> All =
        [new("historySteps", "history, steps"), new("relaxation", "relaxation"), new("filterThreshold", "filter threshold"), new("filterRule", "filter rule"), new("method", "method")];

    /// <summary>The dots, and the ticks of the axis: place (0…1) and text.</summary>
    public (IReadOnlyList<SettingDot> Dots, IReadOnlyList<(double X, string Text)> Ticks) Draw(IEnumerable<CampaignRun> runs)
    {
        ArgumentNullException.ThrowIfNull(runs);
        var known = runs.Select(r => (Run: r, Value: Value(r))).Where(v => v.Value is not null && v.Run.Mean is not null).Select(v => (v.Run, Value: v.Value!)).ToList();
        var numbers = known.All(v => v.Value.Number is not null);
        var ticks = known.Select(v => v.Value).DistinctBy(v => v.Text).OrderBy(v => v.Number ?? 0).ThenBy(v => v.Text, StringComparer.Ordinal).ToList();
        double low = numbers && ticks.Count > 0 ? ticks[0].Number!.Value : 0, high = numbers && ticks.Count > 0 ? ticks[^1].Number!.Value : 0;
        double X(Place at) => ticks.Count < 2 ? 0.5 : numbers ? (at.Number!.Value - low) / (high - low) : (ticks.FindIndex(t => t.Text == at.Text) + 0.5) / ticks.Count;
        return ([.. known.Select(v => new SettingDot(X(v.Value), v.Run.Mean!.Value, v.Run.Low!.Value, v.Run.High!.Value, v.Run.Name, v.Value.Text, v.Run.Settings.Method is not (Records.CouplingMethod.Fixed or Records.CouplingMethod.Aitken)))],
            [.. ticks.Select(t => (X(t), t.Text))]);
    }

    private Place? Value(CampaignRun run) => Key switch
    {
        "historySteps" => run.Settings.HistorySteps is { } h ? new(h, Numbers.Count(h)) : null,
        "relaxation" => run.Settings.Relaxation is { } w ? new(w, Numbers.Sig(w, 2)) : null,
        "filterThreshold" => run.Settings.FilterThreshold is > 0 and var e ? new(Math.Log10(e), Numbers.Power(e)) : null,
        "filterRule" => run.Settings.FilterRule is { } rule ? new(null, CampaignView.Name(rule)) : null,
        _ => run.Settings.Method is { } method ? new(null, CampaignView.Name(method)) : null,
    };

    private sealed record Place(double? Number, string Text);
}
