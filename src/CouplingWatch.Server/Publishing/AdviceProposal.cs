using System.Text.Json;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Publishing;

/// <summary>The settings revision that a piece of advice stands for.</summary>
internal static class AdviceProposal
{
    /// <summary>Null when the advice names no value, or nothing that can be changed in flight.</summary>
    public static SettingsProposal? Of(Advice advice, string? reason, bool? confirm)
    {
        if (advice is { Setting: Commands.DropHistory })
            return new SettingsProposal { Settings = new CouplingSettings(), Commands = [Commands.DropHistory], Reason = reason, Confirm = confirm };
        var settings = advice.Setting switch
        {
            "relaxation" when advice.Value is { } value => new CouplingSettings { Relaxation = value },
            "historySteps" when advice.Value is { } value => new CouplingSettings { HistorySteps = (int)value },
            "filterThreshold" when advice.Value is { } value => new CouplingSettings { FilterThreshold = value },
            "predictorOrder" when advice.Value is { } value => new CouplingSettings { PredictorOrder = (int)value },
            "iterationCap" when advice.Value is { } value => new CouplingSettings { IterationCap = (int)value },
            "tolerance" when advice.Value is { } value => new CouplingSettings { Tolerance = value },
            // A rule and its threshold belong together: the number beside a rule is the threshold for it.
            "filterRule" when Word<FilterRule>(advice.To) is { } rule => new CouplingSettings { FilterRule = rule, FilterThreshold = advice.Value },
            "method" when Word<CouplingMethod>(advice.To) is { } method => new CouplingSettings { Method = method },
            "surrogate" when advice.To is { } surrogate => new CouplingSettings { Surrogate = surrogate },
            _ => null,
        };
        return settings is null ? null : new SettingsProposal { Settings = settings, Reason = reason, Confirm = confirm };
    }

    private static T? Word<T>(string? text) where T : struct, Enum
    {
        foreach (var known in Enum.GetValues<T>())
        {
            if (JsonNamingPolicy.KebabCaseLower.ConvertName(known.ToString()) == text) return known;
        }
        return null;
    }
}
