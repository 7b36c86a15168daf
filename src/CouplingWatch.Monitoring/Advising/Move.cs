using System.Text.Json.Nodes;

namespace CouplingWatch.Monitoring.Advising;

/// <summary>One thing to change, as a check or the standing advice proposes it.</summary>
internal sealed record Move
{
    /// <summary>Name of the setting, camelCase as in the stream.</summary>
    public required string Setting { get; init; }
    /// <summary>up, down or change; null when <see cref="To"/> says it all.</summary>
    public string? Direction { get; init; }
    public string? To { get; init; }
    public string? From { get; init; }
    public double? Value { get; init; }
    public string? Solver { get; init; }
    public string? Field { get; init; }
    public JsonObject Expected { get; init; } = [];
    /// <summary>It changes what the run computes, not only what it costs.</summary>
    public bool AltersResult { get; init; }
    public required string Text { get; init; }
    public string? Caveat { get; init; }

    /// <summary>Moves with the same key are the same piece of advice.</summary>
    public string Key => Solver is null && Field is null ? Setting : $"{Setting}~{Solver ?? Field}";
}
