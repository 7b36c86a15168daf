using CouplingWatch.Records;

namespace CouplingWatch.Wire;

public enum RevisionState { Published, PickedUp, Applied, Refused, Withdrawn }

/// <summary>One settings revision. Revision 0 is <c>open.settings</c>.</summary>
public sealed record SettingsRevision
{
    public required int Revision { get; init; }
    /// <summary>The complete settings of this revision.</summary>
    public required CouplingSettings Settings { get; init; }
    /// <summary>Commands that go with it: <c>dropHistory</c>, <c>stop</c>.</summary>
    public IReadOnlyList<string> Commands { get; init; } = [];
    /// <summary>What this revision changes, old → new, one line a setting.</summary>
    public IReadOnlyList<SettingChange> Changes { get; init; } = [];
    public string? By { get; init; }
    public DateTimeOffset? At { get; init; }
    public string? Reason { get; init; }
    public RevisionState State { get; init; }
    public int? FromStep { get; init; }
    public string? Refused { get; init; }
    /// <summary>Measured before/after; null until enough steps ran under it.</summary>
    public RevisionEffect? Effect { get; init; }
}

/// <param name="Setting">Name as in the stream (camelCase).</param>
/// <param name="Alters"><c>result</c> for tolerance and iterationCap, <c>cost</c> otherwise.</param>
public sealed record SettingChange(string Setting, string From, string To, string Alters);

/// <summary>Mean iterations a step before and after. A plain before/after, biased towards improvement; the pages say so.</summary>
public sealed record RevisionEffect(double Before, int StepsBefore, double After, int StepsAfter);

/// <summary>Body of <c>PUT …/settings</c>.</summary>
public sealed record SettingsProposal
{
    public required CouplingSettings Settings { get; init; }
    public IReadOnlyList<string> Commands { get; init; } = [];
    public string? Reason { get; init; }
    /// <summary>Must be true when the tolerance or the iteration cap changes.</summary>
    public bool? Confirm { get; init; }
    /// <summary>Back to this revision when a step under the new one is capped.</summary>
    public int? FallbackTo { get; init; }
}
