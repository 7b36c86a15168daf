using System.Globalization;
using System.Text.Json;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Race;

/// <summary>What sets two sets of coupling settings apart, by the setting names of the stream.</summary>
public static class SettingsDifference
{
    private const double Same = 1e-9;

    /// <summary>One line a setting, old → new, in a fixed order; empty when they are the same. A setting not declared on one side differs from any value.</summary>
    public static IReadOnlyList<SettingChange> Between(CouplingSettings from, CouplingSettings to)
    {
        ArgumentNullException.ThrowIfNull(from);
        ArgumentNullException.ThrowIfNull(to);
        var changes = new List<SettingChange>();
        Add("method", Name(from.Method), Name(to.Method));
        AddNumber("relaxation", from.Relaxation, to.Relaxation);
        AddNumber("historySteps", from.HistorySteps, to.HistorySteps);
        Add("filterRule", Name(from.FilterRule), Name(to.FilterRule));
        AddNumber("filterThreshold", from.FilterThreshold, to.FilterThreshold);
        AddNumber("iterationCap", from.IterationCap, to.IterationCap);
        AddNumber("predictorOrder", from.PredictorOrder, to.PredictorOrder);
        AddNumber("tolerance", from.Tolerance, to.Tolerance);
        Add("surrogate", from.Surrogate, to.Surrogate);
        return changes;

        void Add(string setting, string? a, string? b)
        {
            if (!string.Equals(a, b, StringComparison.Ordinal)) changes.Add(new SettingChange(setting, a ?? Undeclared, b ?? Undeclared, Alters(setting)));
        }

        void AddNumber(string setting, double? a, double? b)
        {
            if (a is { } x && b is { } y && Math.Abs(x - y) <= Same * Math.Max(Math.Abs(x), Math.Abs(y))) return;
            Add(setting, Number(a), Number(b));
        }
    }

    public static bool AreSame(CouplingSettings a, CouplingSettings b) => Between(a, b).Count == 0;

    /// <summary>Why the run cannot be asked to go from one to the other and back in flight; null when it can.</summary>
    public static string? Refusal(CouplingSettings from, CouplingSettings to, AdjustableSettings adjustable)
    {
        ArgumentNullException.ThrowIfNull(adjustable);
        foreach (var change in Between(from, to))
        {
            if (change.From == Undeclared) return $"the run does not say which {change.Setting} it uses, so it could not go back";
            if (change.To == Undeclared) return $"{change.Setting} is not given";
            if (!adjustable.Allows(change.Setting)) return $"the run does not declare {change.Setting} adjustable";
            if (adjustable.Choices.TryGetValue(change.Setting, out var choices) && !choices.Contains(change.To))
                return $"{change.Setting} {change.To} is not one of {string.Join(", ", choices)}";
            if (adjustable.Ranges.TryGetValue(change.Setting, out var range) && !range.Contains(Value(to, change.Setting)))
                return $"{change.Setting} {change.To} lies outside {Number(range.Low)} to {Number(range.High)}";
        }
        return null;
    }

    /// <summary>A short name for <paramref name="to"/> as it differs from <paramref name="from"/>: "own-norm 1e-4, history 8".</summary>
    public static string Describe(CouplingSettings from, CouplingSettings to)
    {
        var changes = Between(from, to);
        if (changes.Count == 0) return "in use";
        var words = new List<string>();
        var filter = changes.Any(c => c.Setting is "filterRule" or "filterThreshold");
        foreach (var change in changes)
        {
            if (change.Setting is "filterRule" or "filterThreshold") continue;
            words.Add(change.Setting == "method" ? change.To : $"{Word(change.Setting)} {change.To}");
        }
        if (filter) words.Insert(changes[0].Setting == "method" ? 1 : 0, $"{Name(to.FilterRule)} {Number(to.FilterThreshold)}".Trim());
        return string.Join(", ", words);
    }

    internal const string Undeclared = "not declared";

    internal static string? Name(CouplingMethod? method) => method is { } m ? JsonNamingPolicy.KebabCaseLower.ConvertName(m.ToString()) : null;

    internal static string? Name(FilterRule? rule) => rule is { } r ? JsonNamingPolicy.KebabCaseLower.ConvertName(r.ToString()) : null;

    /// <summary>At most six significant digits; powers of ten below 0.01 as 1e-4.</summary>
    internal static string? Number(double? value)
    {
        if (value is not { } number) return null;
        if (number == 0 || Math.Abs(number) >= 0.01) return number.ToString("0.######", CultureInfo.InvariantCulture);
        var text = number.ToString("0.#####e0", CultureInfo.InvariantCulture);
        return text;
    }

    private static double Value(CouplingSettings settings, string setting) => setting switch
    {
        "relaxation" => settings.Relaxation,
        "historySteps" => settings.HistorySteps,
        "filterThreshold" => settings.FilterThreshold,
        "iterationCap" => settings.IterationCap,
        "predictorOrder" => settings.PredictorOrder,
        "tolerance" => settings.Tolerance,
        _ => null,
    } ?? double.NaN;

    private static string Word(string setting) => setting switch
    {
        "historySteps" => "history",
        "predictorOrder" => "predictor",
        "iterationCap" => "cap",
        _ => setting,
    };

    private static string Alters(string setting) => setting is "tolerance" or "iterationCap" ? "result" : "cost";
}
