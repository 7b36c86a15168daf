using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Ledger;
using CouplingWatch.Components.SettingsForm;
using CouplingWatch.Records;

namespace CouplingWatch.Components.RunPage;

/// <summary>Settings in one line.</summary>
public static class SettingsWords
{
    /// <summary>"iqn-ils, history 4 steps, own-norm 10⁻⁴, relaxation 0.1, cap 40"; what was not declared is left out.</summary>
    public static string Of(CouplingSettings settings)
    {
        ArgumentNullException.ThrowIfNull(settings);
        var parts = new List<string>();
        if (SettingKind.Named("method")!.Get(settings) is { } method) parts.Add(method);
        if (settings.HistorySteps is { } q) parts.Add($"history {Numbers.Count(q, "step")}");
        if (settings is { FilterRule: null, FilterThreshold: { } alone }) parts.Add($"threshold {SettingKind.Exact(alone, power: true)}");
        if (settings.FilterRule is { } rule) parts.Add($"{LedgerRows.Named(rule)}{(settings.FilterThreshold is { } e ? $" {SettingKind.Exact(e, power: true)}" : "")}");
        if (settings.Relaxation is { } w) parts.Add($"relaxation {SettingKind.Exact(w)}");
        if (settings.PredictorOrder is { } p) parts.Add(p switch { 0 => "predictor constant", 1 => "predictor linear", 2 => "predictor quadratic", _ => $"predictor order {p}" });
        if (settings.IterationCap is { } cap) parts.Add($"cap {cap}");
        return parts.Count == 0 ? "settings not declared" : string.Join(", ", parts);
    }
}
