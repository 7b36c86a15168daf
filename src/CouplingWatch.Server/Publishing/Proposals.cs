using System.Globalization;
using CouplingWatch.Records;
using CouplingWatch.Server.Problems;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Publishing;

/// <param name="Setting">The setting or command concerned.</param>
/// <param name="Expected">What would have been taken.</param>
internal sealed record Refusal(Problem Problem, string Detail, string? Setting = null, string? Expected = null)
{
    public IResult Answer() => Problem.Because(Detail, ("member", Setting), ("expected", Expected));
}

/// <summary>Whether a run may be asked for a change: only what its code declared adjustable, only within what it declared.</summary>
internal static class Proposals
{
    /// <summary>Why the proposal is not published; null when it may be.</summary>
    public static Refusal? Refuse(string run, SettingsProposal proposal, CouplingSettings inForce, AdjustableSettings adjustable)
    {
        if (string.IsNullOrWhiteSpace(proposal.Reason))
            return new(Problem.Malformed, "A revision needs a reason; it stands in the run's record.", "reason", "a sentence");
        var before = SettingValue.Of(inForce).ToDictionary(v => v.Name, StringComparer.Ordinal);
        var changes = SettingValue.Of(proposal.Settings).Where(v => !before.TryGetValue(v.Name, out var old) || old.Text != v.Text).ToList();
        if (changes.Count == 0 && proposal.Commands.Count == 0)
            return new(Problem.Malformed, $"Nothing would change: run {run} has these settings already.", "settings", "at least one setting that differs, or a command");
        foreach (var change in changes)
        {
            if (RefuseChange(run, change, adjustable) is { } refusal) return refusal;
        }
        foreach (var command in proposal.Commands)
        {
            if (RefuseCommand(run, command, adjustable) is { } refusal) return refusal;
        }
        var altering = changes.FirstOrDefault(c => c.AltersResult);
        return altering.Name is not null && proposal.Confirm != true
            ? new(Problem.Unconfirmed, $"{altering.Name} changes the converged result, not only its cost; say “confirm”: true to publish it.", altering.Name, "confirm")
            : null;
    }

    private static Refusal? RefuseChange(string run, SettingValue change, AdjustableSettings adjustable)
    {
        if (adjustable.Ranges.TryGetValue(change.Name, out var range))
        {
            if (change.Number is { } number && range.Contains(number)) return null;
            var span = string.Create(CultureInfo.InvariantCulture, $"{range.Low:R} to {range.High:R}");
            return new(Problem.OutOfRange, $"{change.Name} = {change.Text} lies outside what run {run} declared: {span}.", change.Name, span);
        }
        if (adjustable.Choices.TryGetValue(change.Name, out var choices))
        {
            if (choices.Contains(change.Text)) return null;
            var list = string.Join(", ", choices);
            return new(Problem.OutOfRange, $"{change.Name} = {change.Text} is none of what run {run} declared: {list}.", change.Name, list);
        }
        return new(Problem.NotAdjustable, $"Run {run} did not declare {change.Name} adjustable; it needs a restart. {Adjustables(adjustable)}", change.Name, Adjustables(adjustable));
    }

    private static Refusal? RefuseCommand(string run, string command, AdjustableSettings adjustable)
    {
        var name = Commands.NameOf(command);
        if (!adjustable.Commands.Contains(name))
            return new(Problem.NotAdjustable, $"Run {run} did not declare the command {name}.", command, adjustable.Commands.Count == 0 ? "no command" : string.Join(", ", adjustable.Commands));
        return Commands.IsKnown(command) ? null : new(Problem.OutOfRange, $"“{command}” is no command.", command, Commands.All);
    }

    private static string Adjustables(AdjustableSettings adjustable) => adjustable.Ranges.Count + adjustable.Choices.Count == 0
        ? "It declared no setting."
        : "It declared " + string.Join(", ", adjustable.Ranges.Keys.Concat(adjustable.Choices.Keys)) + ".";
}
