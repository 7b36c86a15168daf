using CouplingWatch.Monitoring.State;

namespace CouplingWatch.Monitoring.Advising;

/// <summary>Whether the run takes a move in flight.</summary>
internal static class Adjustability
{
    /// <summary>True when it was declared adjustable and the value fits; a number is brought to the declared range where it still points the same way.</summary>
    public static (bool Adjustable, double? Value) Of(RunState run, Move move)
    {
        if (run.Open?.Adjustable is not { } declared) return (false, move.Value);
        if (move.Setting == "dropHistory") return (declared.Commands.Contains("dropHistory"), move.Value);
        if (move.To is not null)
            return (declared.Choices.TryGetValue(move.Setting, out var choices) && choices.Contains(move.To), move.Value);
        if (!declared.Ranges.TryGetValue(move.Setting, out var range) || move.Value is not { } value) return (false, move.Value);
        var fitted = Math.Clamp(value, range.Low, range.High);
        var pointsStill = move.From is null || !double.TryParse(move.From, System.Globalization.CultureInfo.InvariantCulture, out var from)
            || (move.Direction == "up" ? fitted > from : move.Direction != "down" || fitted < from);
        return pointsStill ? (true, fitted) : (false, value);
    }

    public static string NeedsRestart(Move move) => move.Setting switch
    {
        "solverNoise" or "weight" or "timeStep" or "tolerance" => " (not adjustable in flight: set it in the code and restart)",
        _ => " (the run did not declare it adjustable: it needs a restart)",
    };
}
