using System.Text.Json;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Campaign;

/// <summary>What the runs of a campaign have taught: the cheapest settings that met every step, and how sure that is. Pure.</summary>
public sealed record CampaignView
{
    /// <summary>Fewest steps from which anything is said.</summary>
    public const int LeastSteps = 6;

    /// <summary>Cheapest first; runs without steps last.</summary>
    public IReadOnlyList<CampaignRun> Runs { get; private init; } = [];
    /// <summary>The best so far; null while nothing can be said.</summary>
    public CampaignRun? Best { get; private init; }
    public string Sentence { get; private init; } = "";
    public string HowSure { get; private init; } = "";
    /// <summary>The scheme compared; runs of the other are listed, never compared by iterations.</summary>
    public CouplingScheme Scheme { get; private init; }
    public bool Mixed { get; private init; }

    public static CampaignView Of(IReadOnlyList<CampaignRun> runs)
    {
        ArgumentNullException.ThrowIfNull(runs);
        var scheme = runs.Count(r => r.Summary.Scheme == CouplingScheme.Parallel) > runs.Count / 2.0 ? CouplingScheme.Parallel : CouplingScheme.Serial;
        var compared = runs.Where(r => r.Summary.Scheme == scheme && r is { Mean: not null, GaveUp: 0, Steps: >= LeastSteps }).OrderBy(r => r.Mean).ThenByDescending(r => r.Steps).ToList();
        var best = compared.FirstOrDefault();
        var same = best is null ? [] : compared.Where(r => Key(r.Settings) == Key(best.Settings)).ToList();
        return new CampaignView
        {
            Runs = [.. runs.OrderBy(r => r.Mean ?? double.PositiveInfinity).ThenBy(r => r.Name, StringComparer.Ordinal)],
            Best = best,
            Scheme = scheme,
            Mixed = runs.Any(r => r.Summary.Scheme != scheme),
            Sentence = best is null ? $"Nothing yet: no run has completed {LeastSteps} steps without giving one up." : $"{Words(best.Settings)}: {Numbers.Fixed(best.Mean)} iterations a step.",
            HowSure = best is null ? "" : Sure(best, same, compared.Count),
        };
    }

    /// <summary>Settings in words: <c>iqn-ils, history 4, own-norm 10⁻⁴</c>.</summary>
    public static string Words(CouplingSettings settings)
    {
        ArgumentNullException.ThrowIfNull(settings);
        var parts = new List<string>();
        if (settings.Method is { } method) parts.Add(Name(method));
        if (settings.Relaxation is { } relaxation) parts.Add($"relaxation {Numbers.Sig(relaxation, 2)}");
        if (settings.Method is not (CouplingMethod.Fixed or CouplingMethod.Aitken))
        {
            if (settings.HistorySteps is { } history) parts.Add($"history {history}");
            if (Filter(settings) is { } filter) parts.Add(filter);
        }
        return parts.Count == 0 ? "settings not declared" : string.Join(", ", parts);
    }

    public static string? Filter(CouplingSettings settings)
    {
        ArgumentNullException.ThrowIfNull(settings);
        return settings.FilterRule is { } rule ? Name(rule) + (settings.FilterThreshold is { } e ? " " + Numbers.Power(e) : "") : null;
    }

    /// <summary>The settings as the next run can read them.</summary>
    public static string File(CouplingSettings settings) => JsonSerializer.Serialize(settings, WireJson.Options).Replace("\",\"", "\", \"", StringComparison.Ordinal).Replace(",\"", ",\n \"", StringComparison.Ordinal);

    public static string Name(CouplingMethod method) => JsonNamingPolicy.KebabCaseLower.ConvertName(method.ToString());

    public static string Name(FilterRule rule) => JsonNamingPolicy.KebabCaseLower.ConvertName(rule.ToString());

    private static string Key(CouplingSettings settings) => JsonSerializer.Serialize(settings with { IterationCap = null, Tolerance = null }, WireJson.Options);

    private static string Sure(CampaignRun best, IReadOnlyList<CampaignRun> same, int compared)
    {
        var ran = string.Join(" and ", same.Take(3).Select(r => $"{Numbers.Count(r.Steps, "step")} of {r.Name}"));
        var steps = same.Sum(r => r.Steps);
        var sure = same.Count >= 2 && steps >= 30 ? "Fairly sure" : steps >= 30 ? "One run only" : "Not sure yet";
        var against = compared == 1 ? " Nothing else to compare with." : $" Against {Numbers.Count(compared - same.Count, "other run")} that met every step.";
        return $"{sure}: {ran}.{against} Runs of one problem only: a stiffer leaf or a longer step is another problem, and a race on the running problem decides better than a comparison of runs.";
    }
}
