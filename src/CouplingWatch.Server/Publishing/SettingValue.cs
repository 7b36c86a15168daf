using System.Globalization;
using System.Text.Json;
using System.Text.Json.Nodes;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Publishing;

/// <summary>One setting by its name in the stream, as a number or as a word.</summary>
/// <param name="Text">As it is written in the stream.</param>
internal readonly record struct SettingValue(string Name, double? Number, string Text)
{
    /// <summary>Settings that change the converged result, not only its cost.</summary>
    public bool AltersResult => Name is "tolerance" or "iterationCap";

    /// <summary>Every setting that is stated, in the order of the stream's format; the code's own ones by <c>own.NAME</c>.</summary>
    public static IEnumerable<SettingValue> Of(CouplingSettings settings)
    {
        if (settings.Method is { } method) yield return Word("method", method);
        if (settings.Relaxation is { } relaxation) yield return Value("relaxation", relaxation);
        if (settings.HistorySteps is { } history) yield return Value("historySteps", history);
        if (settings.FilterRule is { } rule) yield return Word("filterRule", rule);
        if (settings.FilterThreshold is { } threshold) yield return Value("filterThreshold", threshold);
        if (settings.IterationCap is { } cap) yield return Value("iterationCap", cap);
        if (settings.PredictorOrder is { } order) yield return Value("predictorOrder", order);
        if (settings.Tolerance is { } tolerance) yield return Value("tolerance", tolerance);
        if (settings.Surrogate is { } surrogate) yield return new SettingValue("surrogate", null, surrogate);
        foreach (var (name, node) in settings.Own ?? []) yield return Own("own." + name, node);
    }

    private static SettingValue Value(string name, double number) => new(name, number, number.ToString("R", CultureInfo.InvariantCulture));

    private static SettingValue Word<T>(string name, T word) where T : struct, Enum => new(name, null, JsonNamingPolicy.KebabCaseLower.ConvertName(word.ToString()));

    private static SettingValue Own(string name, JsonNode? node) => node is JsonValue value && value.TryGetValue(out double number)
        ? Value(name, number)
        : new SettingValue(name, null, node is JsonValue text && text.TryGetValue(out string? word) ? word : node?.ToJsonString(WireJson.Options) ?? "null");
}
