using System.Text.Json.Serialization;
using CouplingWatch.Records;

namespace CouplingWatch.Wire;

/// <summary>What the server itself observed by its clock, and what people did. Journaled between the records, so that a replay judges the same.</summary>
[JsonPolymorphic(TypeDiscriminatorPropertyName = "event")]
[JsonDerivedType(typeof(SilentEvent), "silent")]
[JsonDerivedType(typeof(BackEvent), "back")]
[JsonDerivedType(typeof(HangEvent), "hang")]
[JsonDerivedType(typeof(PublishedEvent), "published")]
[JsonDerivedType(typeof(PickedUpEvent), "picked-up")]
[JsonDerivedType(typeof(AcknowledgedEvent), "acknowledged")]
[JsonDerivedType(typeof(ShelvedEvent), "shelved")]
[JsonDerivedType(typeof(UnshelvedEvent), "unshelved")]
[JsonDerivedType(typeof(DismissedEvent), "dismissed")]
[JsonDerivedType(typeof(RaceStartedEvent), "race-started")]
[JsonDerivedType(typeof(RaceStoppedEvent), "race-stopped")]
public abstract record ServerEvent
{
    public required DateTimeOffset At { get; init; }
}

/// <summary>No record for longer than the limit.</summary>
public sealed record SilentEvent(double SecondsSilent, double LimitSeconds) : ServerEvent;

/// <summary>Records again after silence.</summary>
public sealed record BackEvent(double SecondsSilent) : ServerEvent;

public sealed record HangEvent(string Solver, double InsideSeconds, double LimitSeconds) : ServerEvent;

public sealed record PublishedEvent(int Revision, CouplingSettings Settings, IReadOnlyList<string> Commands, string By, string? Reason, int? FallbackTo = null) : ServerEvent
{
    /// <summary>The race that published it; null for a person.</summary>
    public string? Race { get; init; }
    /// <summary>The arm of that race; 0 when it goes back to the settings before.</summary>
    public int? Arm { get; init; }
}

/// <summary>The code read the revision.</summary>
public sealed record PickedUpEvent(int Revision) : ServerEvent;

public sealed record AcknowledgedEvent(string AlertId, string By) : ServerEvent;

public sealed record ShelvedEvent(string AlertId, string By, DateTimeOffset Until, string Reason) : ServerEvent;

public sealed record UnshelvedEvent(string AlertId, string By) : ServerEvent;

public sealed record DismissedEvent(string AdviceId, string By, string Reason) : ServerEvent;

/// <summary>A race begins. Carries what was known only at that moment, so that a replay runs the same race.</summary>
/// <param name="Race">Its id, such as <c>race-1</c>.</param>
/// <param name="Challengers">As resolved at the start, in order, at most six.</param>
public sealed record RaceStartedEvent(string Race, string By, string? Reason, RaceScore ScoreBy, long Seed, IReadOnlyList<RaceChallenger> Challengers) : ServerEvent;

public sealed record RaceStoppedEvent(string Race, string By, string? Reason) : ServerEvent;
