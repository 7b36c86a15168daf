using System.Text.Json.Nodes;

namespace CouplingWatch.Wire;

/// <summary>How much it matters: critical = node-hours are being lost now or the result is wrong; warning = will be lost unless changed; note = worth knowing.</summary>
public enum Severity { Note, Warning, Critical }

public enum AlertState { Unacknowledged, Acknowledged, Returned, Shelved, Closed }

/// <summary>One alert of one run. Its id is run, check and first seq, so the same records give the same ids.</summary>
public sealed record Alert
{
    public required string Id { get; init; }
    public required string Run { get; init; }
    /// <summary>The id of the check, such as <c>divergence</c>.</summary>
    public required string Check { get; init; }
    public required Severity Severity { get; init; }
    public AlertState State { get; init; } = AlertState.Unacknowledged;
    public DateTimeOffset? RaisedAt { get; init; }
    public required int Step { get; init; }
    public required int Iteration { get; init; }
    /// <summary>Seq of the record that raised it.</summary>
    public required long Seq { get; init; }
    /// <summary>Seq of the latest record at which the condition held again.</summary>
    public long LastSeq { get; init; }
    public int LastStep { get; init; }
    public long? ClosedSeq { get; init; }
    /// <summary>One sentence a tired engineer understands.</summary>
    public required string Text { get; init; }
    /// <summary>The numbers behind it, by name.</summary>
    public JsonObject Evidence { get; init; } = [];
    /// <summary>Ids of the advice that answers it.</summary>
    public IReadOnlyList<string> Advice { get; init; } = [];
    /// <summary>Id of the alert that explains this one, when a cause is open in the same step ("also seen").</summary>
    public string? Cause { get; init; }
    public string? AcknowledgedBy { get; init; }
    public DateTimeOffset? AcknowledgedAt { get; init; }
    public DateTimeOffset? ShelvedUntil { get; init; }
    public string? ShelvedReason { get; init; }
}

/// <summary>One move that would make things better, with the ground it stands on.</summary>
public sealed record Advice
{
    public required string Id { get; init; }
    /// <summary>relaxation, method, historySteps, dropHistory, filterRule, filterThreshold, predictorOrder, iterationCap, tolerance, solverNoise, weight, timeStep, surrogate, race.</summary>
    public required string Setting { get; init; }
    /// <summary>up, down or change; null when <see cref="To"/> says it all.</summary>
    public string? Move { get; init; }
    /// <summary>The value proposed as text (a method, a rule, <c>once</c>); null for numbers.</summary>
    public string? To { get; init; }
    public string? From { get; init; }
    /// <summary>The number proposed.</summary>
    public double? Value { get; init; }
    public string? Solver { get; init; }
    public string? Field { get; init; }
    /// <summary>Ids of the alerts it answers; empty for standing advice.</summary>
    public IReadOnlyList<string> Because { get; init; } = [];
    public JsonObject Expected { get; init; } = [];
    /// <summary><c>result</c> or <c>cost</c>.</summary>
    public string Alters { get; init; } = "cost";
    /// <summary>False: the run did not declare it adjustable, so it needs a restart.</summary>
    public bool Adjustable { get; init; }
    /// <summary>The sentence shown: "lower the threshold 10⁻² → 10⁻⁷".</summary>
    public required string Text { get; init; }
    /// <summary>What would prove it wrong, and the risk.</summary>
    public string? Caveat { get; init; }
    /// <summary>Seq of the record at which it was first given.</summary>
    public long Seq { get; init; }
}

/// <summary>A check that cannot judge with what this run sends, and what to send for it.</summary>
public sealed record NotJudged(string Check, string Why, string Send);

/// <summary>The state of a run in one sentence. The code is stable; the text is written from it and the numbers.</summary>
/// <param name="Code">on-course, learning, dearer, losing-time, diverging, gave-up, silent, not-judged, finished, aborted, diverged, stopped.</param>
/// <param name="Word">The word shown in bold with its sign.</param>
/// <param name="Text">The sentence after the word.</param>
public sealed record Verdict(string Code, string Word, string Text, Severity? Severity = null, int? SinceStep = null);
