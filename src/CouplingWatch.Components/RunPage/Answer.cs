using CouplingWatch.Components.Parts;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.RunPage;

/// <summary>The answer to one of the five questions: left of the seam.</summary>
/// <param name="Mark">Sign and seam.</param>
/// <param name="Say">One sentence of at most some 20 words.</param>
public sealed record Answer(StateMark Mark, string Say)
{
    /// <summary>What it means, a sentence or two each.</summary>
    public IReadOnlyList<string> Notes { get; init; } = [];

    /// <summary>Key numbers, by name.</summary>
    public IReadOnlyList<Fact> Facts { get; init; } = [];

    /// <summary>The answer where none can be given: why, and what to send.</summary>
    public static Answer NotJudged(RunDetail run, string otherwise, params string[] checks)
    {
        ArgumentNullException.ThrowIfNull(run);
        var lacking = run.NotJudged.FirstOrDefault(n => checks.Contains(n.Check));
        return lacking is null
            ? new Answer(StateMark.NotJudged, otherwise)
            : new Answer(StateMark.NotJudged, $"Not judged: {lacking.Why}.") { Notes = ToSend(lacking) is { Length: > 0 } send ? [$"For it, send {send}."] : [] };
    }

    /// <summary>A phrase as a sentence of its own: a capital at its head, a full stop at its end.</summary>
    public static string Sentence(string text)
    {
        var plain = text.TrimStart(':', ' ');
        return plain.Length == 0 ? "" : char.ToUpperInvariant(plain[0]) + plain[1..] + (plain[^1] is '.' or '!' or '?' ? "" : ".");
    }

    /// <summary>The open alert of one of the checks that speaks of the step in progress; null when none does.</summary>
    public static Alert? OpenNow(RunDetail run, params string[] checks) =>
        Open(run, a => Math.Max(a.Step, a.LastStep) >= run.Summary.Step, checks);

    /// <summary>The open alert of one of the checks, worst first; null when all is quiet.</summary>
    public static Alert? Open(RunDetail run, params string[] checks) => Open(run, _ => true, checks);

    /// <summary>"why; send what", the second half left out where nothing could be sent for it.</summary>
    public static string ToSend(NotJudged lacking) => SendsNothing(lacking) ? "" : lacking.Send;

    private static bool SendsNothing(NotJudged lacking) => lacking.Send.Length == 0 || lacking.Send.StartsWith("nothing", StringComparison.OrdinalIgnoreCase);

    private static Alert? Open(RunDetail run, Func<Alert, bool> holds, string[] checks) =>
        run.Summary.OpenAlerts
            .Where(a => checks.Contains(a.Check) && a.State is not (AlertState.Returned or AlertState.Closed or AlertState.Shelved) && holds(a))
            .OrderByDescending(a => a.Severity).FirstOrDefault();
}

/// <summary>A key number: its name, its value with unit, and why it is not known where it is not.</summary>
public sealed record Fact(string Name, string Value, string? Why = null);
