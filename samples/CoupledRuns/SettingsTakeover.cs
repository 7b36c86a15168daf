using System.Globalization;
using CouplingWatch.Records;

namespace CoupledRuns;

/// <summary>Decides whether a published revision is taken over: only what the run declared adjustable, and only within its range.</summary>
public static class SettingsTakeover
{
    /// <summary>Why the revision is refused, or null when it may be taken over.</summary>
    /// <param name="inForce">The settings in force.</param>
    /// <param name="published">The complete settings of the revision; what it leaves out is unchanged.</param>
    /// <param name="commands">The commands of the revision.</param>
    /// <param name="adjustable">What the run declared.</param>
    public static string? Refusal(CouplingSettings inForce, CouplingSettings published, IReadOnlyList<string> commands, AdjustableSettings adjustable)
    {
        ArgumentNullException.ThrowIfNull(inForce);
        ArgumentNullException.ThrowIfNull(published);
        ArgumentNullException.ThrowIfNull(commands);
        ArgumentNullException.ThrowIfNull(adjustable);
        return Number("relaxation", inForce.Relaxation, published.Relaxation, adjustable)
            ?? Number("filterThreshold", inForce.FilterThreshold, published.FilterThreshold, adjustable)
            ?? Number("historySteps", inForce.HistorySteps, published.HistorySteps, adjustable)
            ?? Number("iterationCap", inForce.IterationCap, published.IterationCap, adjustable)
            ?? Number("predictorOrder", inForce.PredictorOrder, published.PredictorOrder, adjustable)
            ?? Number("tolerance", inForce.Tolerance, published.Tolerance, adjustable)
            ?? Choice("filterRule", inForce.FilterRule?.Spelled(), published.FilterRule?.Spelled(), adjustable)
            ?? Choice("method", inForce.Method?.Spelled(), published.Method?.Spelled(), adjustable)
            ?? Choice("surrogate", inForce.Surrogate, published.Surrogate, adjustable)
            ?? commands.Where(c => !adjustable.Commands.Contains(c)).Select(c => $"the command '{c}' was not declared").FirstOrDefault();
    }

    private static string? Number(string name, double? from, double? to, AdjustableSettings adjustable)
    {
        if (to is not { } value || value == from) return null;
        if (!adjustable.Ranges.TryGetValue(name, out var range)) return $"{name} was not declared adjustable";
        return range.Contains(value)
            ? null
            : string.Create(CultureInfo.InvariantCulture, $"{name} {value:G6} lies outside {range.Low:G6} to {range.High:G6}");
    }

    private static string? Choice(string name, string? from, string? to, AdjustableSettings adjustable)
    {
        if (to is null || to == from) return null;
        if (!adjustable.Choices.TryGetValue(name, out var allowed)) return $"{name} was not declared adjustable";
        return allowed.Contains(to) ? null : $"{name} '{to}' is none of {string.Join(", ", allowed)}";
    }
}
