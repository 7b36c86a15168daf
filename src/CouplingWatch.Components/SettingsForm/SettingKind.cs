using System.Globalization;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Ledger;
using CouplingWatch.Records;

namespace CouplingWatch.Components.SettingsForm;

/// <summary>One setting of the form: its name in the stream, its words, how it is read from and written into the settings.</summary>
/// <param name="Name">As in the stream, camelCase.</param>
/// <param name="Words">As the page says it.</param>
/// <param name="AltersResult">Changing it changes what the run converges to.</param>
/// <param name="Get">As the stream writes it; null when not declared.</param>
/// <param name="Make">A change of this setting alone from its text; null when the text is not understood.</param>
public sealed record SettingKind(string Name, string Words, bool AltersResult, Func<CouplingSettings, string?> Get, Func<string, CouplingSettings?> Make)
{
    /// <summary>Whole numbers only.</summary>
    public bool Whole { get; init; }

    /// <summary>Written as a power of ten, whatever its size.</summary>
    public bool Power { get; init; }

    /// <summary>Every setting a revision can change, in the order of the form.</summary>
    public static IReadOnlyList<SettingKind> All { get; } =
    [
        new("method", "method", false, s => s.Method is { } m ? Kebab(m) : null, t => Choice<CouplingMethod>(t, m => new() { Method = m })),
        Number("relaxation", "relaxation", false, s => s.Relaxation, v => new() { Relaxation = v }),
        new("filterRule", "filter rule", false, s => s.FilterRule is { } r ? Kebab(r) : null, t => Choice<FilterRule>(t, r => new() { FilterRule = r })),
        Number("filterThreshold", "threshold", false, s => s.FilterThreshold, v => new() { FilterThreshold = v }) with { Power = true },
        Count("historySteps", "history, steps", false, s => s.HistorySteps, v => new() { HistorySteps = v }),
        Count("predictorOrder", "predictor order", false, s => s.PredictorOrder, v => new() { PredictorOrder = v }),
        Count("iterationCap", "iteration cap", true, s => s.IterationCap, v => new() { IterationCap = v }),
        Number("tolerance", "tolerance", true, s => s.Tolerance, v => new() { Tolerance = v }) with { Power = true },
        new("surrogate", "surrogate", false, s => s.Surrogate, t => t.Trim().Length == 0 ? null : new() { Surrogate = t.Trim() }),
    ];

    public static SettingKind? Named(string name) => All.FirstOrDefault(k => k.Name == name);

    /// <summary>As the page writes a value: exact, small numbers as powers of ten, choices as they are.</summary>
    public string Shown(CouplingSettings settings) => Get(settings) switch
    {
        null => "not declared",
        var text when !Whole && double.TryParse(text, NumberStyles.Float, CultureInfo.InvariantCulture, out var v) => Exact(v, Power),
        var text => text,
    };

    /// <summary>A number to its last digit as one types it: "0.1", "1e-7".</summary>
    public static string Plain(double value)
    {
        var text = value.ToString("R", CultureInfo.InvariantCulture);
        var at = text.IndexOf('E', StringComparison.Ordinal);
        return at < 0 ? text : $"{text[..at]}e{int.Parse(text.AsSpan(at + 1), NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture).ToString(CultureInfo.InvariantCulture)}";
    }

    /// <summary>A number to its last digit: "0.1", "2.5 × 10⁻⁵", "10⁻⁷".</summary>
    /// <param name="power">As a power of ten even where it is not small.</param>
    public static string Exact(double value, bool power = false)
    {
        if (value == 0 || !double.IsFinite(value) || (!power && Math.Abs(value) >= 1e-3)) return value.ToString("R", CultureInfo.InvariantCulture);
        var digits = 1;
        while (digits < 15 && double.Parse(value.ToString("E" + (digits - 1), CultureInfo.InvariantCulture), CultureInfo.InvariantCulture) != value) digits++;
        return Numbers.Power(value, digits);
    }

    /// <summary>The number of a text, read as the threshold field reads it; null when it is none.</summary>
    public static double? Read(string text) =>
        double.TryParse(text, NumberStyles.Float, CultureInfo.InvariantCulture, out var v) ? v : ThresholdText.Parse(text);

    private static SettingKind Number(string name, string words, bool alters, Func<CouplingSettings, double?> get, Func<double, CouplingSettings> make) =>
        new(name, words, alters, s => get(s) is { } v ? Plain(v) : null, t => Read(t) is { } v && double.IsFinite(v) ? make(v) : null);

    private static SettingKind Count(string name, string words, bool alters, Func<CouplingSettings, int?> get, Func<int, CouplingSettings> make) =>
        new(name, words, alters, s => get(s)?.ToString(CultureInfo.InvariantCulture), t => int.TryParse(t, NumberStyles.AllowLeadingSign, CultureInfo.InvariantCulture, out var v) ? make(v) : null) { Whole = true };

    private static CouplingSettings? Choice<T>(string text, Func<T, CouplingSettings> make) where T : struct, Enum =>
        Enum.GetValues<T>().Where(v => Kebab(v) == text.Trim()).Select(v => make(v)).FirstOrDefault();

    private static string Kebab<T>(T value) where T : struct, Enum => System.Text.Json.JsonNamingPolicy.KebabCaseLower.ConvertName(value.ToString());
}
