using System.Globalization;
using System.Text;
using System.Text.Json.Nodes;
using CouplingWatch.Components.Formatting;

namespace CouplingWatch.Components.Alerts;

/// <summary>The numbers behind an alert, as name and value. Names the page does not know are spelt out from the stream's own. Pure.</summary>
public static class EvidenceWords
{
    public static IReadOnlyList<(string Name, string Value)> Of(JsonObject evidence)
    {
        ArgumentNullException.ThrowIfNull(evidence);
        var rows = new List<(string, string)>();
        foreach (var (key, node) in evidence)
            if (node is JsonValue value) rows.Add((Name(key), Value(key, value)));
        return rows;
    }

    /// <summary>A number of the evidence; null when it is missing or no number.</summary>
    public static double? Number(JsonObject evidence, string key)
    {
        ArgumentNullException.ThrowIfNull(evidence);
        return evidence.TryGetPropertyValue(key, out var node) && node is JsonValue value ? Number(value) : null;
    }

    private static string Name(string key) => Known.TryGetValue(key, out var name) ? name : Spelt(key);

    private static string Value(string key, JsonValue value)
    {
        if (Number(value) is not { } number) return value.TryGetValue<bool>(out var yes) ? yes ? "yes" : "no" : value.ToString();
        if (key.Contains("econds", StringComparison.Ordinal)) return Times.Span(TimeSpan.FromSeconds(number));
        if (key.EndsWith("hare", StringComparison.Ordinal)) return Numbers.Percent(number);
        if (key.Contains("hreshold", StringComparison.Ordinal) || key.Contains("oise", StringComparison.Ordinal)) return Numbers.Power(number);
        return number == Math.Floor(number) && Math.Abs(number) < 1e9 ? Numbers.Count((long)number) : Numbers.Sig(number);
    }

    private static double? Number(JsonValue value) => value.GetValueKind() switch
    {
        System.Text.Json.JsonValueKind.Number => double.Parse(value.ToJsonString(), NumberStyles.Float, CultureInfo.InvariantCulture),
        _ => null,
    };

    /// <summary><c>medianGapSeconds</c> becomes <c>median gap</c>: the unit stands with the value.</summary>
    private static string Spelt(string key)
    {
        var words = new StringBuilder();
        foreach (var c in key)
        {
            if (char.IsUpper(c) && words.Length > 0) words.Append(' ');
            words.Append(char.ToLowerInvariant(c));
        }
        var text = words.ToString();
        return text.EndsWith(" seconds", StringComparison.Ordinal) ? text[..^8] : text;
    }

    private static readonly Dictionary<string, string> Known = new(StringComparer.Ordinal)
    {
        ["secondsSilent"] = "silent for",
        ["limitSeconds"] = "limit",
        ["growth"] = "growth since the least",
        ["lowestIteration"] = "least at iteration",
        ["factorPerIteration"] = "factor an iteration",
        ["fallingShare"] = "share of iterations that fell",
        ["improvementDecades"] = "improvement, last eight (decades)",
        ["fellDecades"] = "fell in all (decades)",
        ["timesAboveTarget"] = "times above the target",
        ["iterationsNeeded"] = "iterations needed",
        ["iterationsLeft"] = "iterations left to the cap",
        ["iterationsLater"] = "arrives later by (iterations)",
        ["relaxationLimit"] = "most that the directions seen allow",
        ["relaxationBest"] = "best for the directions seen",
        ["relaxation"] = "relaxation in use",
        ["declaredNoise"] = "noise declared",
        ["uncovered"] = "share of the residual not covered",
        ["live"] = "columns of this step",
        ["liveLeft"] = "of them left out",
        ["left"] = "columns left out",
        ["kept"] = "columns kept",
        ["ofLatest"] = "of the latest updates",
        ["brokenPromises"] = "broken promises",
        ["alphaNorm"] = "norm of the coefficients",
        ["reduction"] = "the residual came to (of the one before)",
        ["usualIterations"] = "usual iterations",
        ["missDecades"] = "missed by (decades)",
        ["medianBaseline"] = "median then",
        ["medianNow"] = "median now",
        ["meanBaseline"] = "mean then",
        ["deviationBaseline"] = "deviation then",
        ["stepsInARow"] = "steps in a row",
        ["unconvergedSteps"] = "unconverged steps in all",
        ["ratio"] = "residual ÷ tolerance",
        ["cosine"] = "cosine of two residuals",
    };
}
