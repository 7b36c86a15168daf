using System.Globalization;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.SettingsForm;

/// <summary>A revision being written: what was typed, whether it may be published, and the proposal it makes. Pure but for its own state.</summary>
public sealed class SettingsDraft(CouplingSettings inForce, AdjustableSettings adjustable, int madeFrom)
{
    private readonly Dictionary<string, string> typed = [];
    private readonly HashSet<string> commands = [];

    public CouplingSettings InForce { get; } = inForce ?? throw new ArgumentNullException(nameof(inForce));

    public AdjustableSettings Adjustable { get; } = adjustable ?? throw new ArgumentNullException(nameof(adjustable));

    /// <summary>The revision it was made from.</summary>
    public int MadeFrom { get; } = madeFrom;

    public string Reason { get; set; } = "";

    /// <summary>The second confirmation, for what alters the result.</summary>
    public bool Confirmed { get; set; }

    public bool FallBack { get; set; }

    /// <summary>What the field of a setting shows.</summary>
    public string Text(SettingKind kind) => typed.GetValueOrDefault(kind.Name) ?? kind.Get(InForce) ?? "";

    public void Type(SettingKind kind, string text)
    {
        ArgumentNullException.ThrowIfNull(kind);
        if (string.Equals(text.Trim(), kind.Get(InForce), StringComparison.Ordinal)) typed.Remove(kind.Name);
        else typed[kind.Name] = text;
        if (!AltersResult) Confirmed = false;
    }

    public bool Commands(string command) => commands.Contains(command);

    public void Command(string command, bool on)
    {
        if (on) commands.Add(command);
        else commands.Remove(command);
    }

    /// <summary>Old → new, one line a setting that really changes.</summary>
    public IReadOnlyList<SettingChange> Changes =>
        [.. Touched.Select(k => (Kind: k, New: k.Make(Text(k)))).Where(c => c.New is not null && c.Kind.Get(c.New) != c.Kind.Get(InForce))
            .Select(c => new SettingChange(c.Kind.Name, c.Kind.Shown(InForce), c.Kind.Shown(c.New!), c.Kind.AltersResult ? "result" : "cost"))];

    public IReadOnlyList<string> GivenCommands => [.. Adjustable.Commands.Where(commands.Contains)];

    public bool AltersResult => Changes.Any(c => c.Alters == "result");

    /// <summary>Why a typed value cannot be published; null when it can.</summary>
    public string? Wrong(SettingKind kind)
    {
        ArgumentNullException.ThrowIfNull(kind);
        if (!typed.TryGetValue(kind.Name, out var text)) return null;
        if (kind.Make(text) is not { } made) return kind.Whole ? "a whole number" : "not understood";
        if (Adjustable.Ranges.TryGetValue(kind.Name, out var range))
        {
            var value = double.Parse(kind.Get(made)!, CultureInfo.InvariantCulture);
            return range.Contains(value) ? null : $"outside what the run declared, {Range(range)}";
        }
        return Adjustable.Choices.TryGetValue(kind.Name, out var choices) && !choices.Contains(kind.Get(made)!) ? "not among what the run declared" : null;
    }

    /// <summary>Changes that the run did not declare adjustable: they can be rehearsed, and need a restart.</summary>
    public IReadOnlyList<SettingKind> NeedRestart => [.. Touched.Where(k => !Adjustable.Allows(k.Name) && k.Make(Text(k)) is not null)];

    /// <summary>What changes, as settings; null where a value is not understood or lies outside what was declared.</summary>
    public CouplingSettings? Change => Touched.Any(k => Wrong(k) is not null) ? null : Merged;

    /// <summary>The same changes made from another revision.</summary>
    public SettingsDraft From(CouplingSettings settings, int revision)
    {
        var fresh = new SettingsDraft(settings, Adjustable, revision) { Reason = Reason, FallBack = FallBack };
        foreach (var kind in Touched) fresh.Type(kind, Text(kind));
        foreach (var command in commands) fresh.Command(command, true);
        return fresh;
    }

    /// <summary>Takes values over, each only where it is stated.</summary>
    public void Take(CouplingSettings change)
    {
        foreach (var kind in SettingKind.All)
            if (kind.Get(change) is { } text) Type(kind, text);
    }

    /// <summary>Back to what is in force.</summary>
    public void Clear()
    {
        typed.Clear();
        commands.Clear();
        (Confirmed, FallBack) = (false, false);
    }

    /// <summary>What still stands against publishing, as a sentence; null when nothing does.</summary>
    public string? Hindrance
    {
        get
        {
            if (Touched.FirstOrDefault(k => Wrong(k) is not null) is { } bad) return $"The {bad.Words} is {Wrong(bad)}.";
            if (NeedRestart.FirstOrDefault() is { } fixedOne) return $"The {fixedOne.Words} was not declared adjustable: changing it needs a restart.";
            if (Changes.Count == 0 && commands.Count == 0) return "Nothing is changed yet.";
            if (string.IsNullOrWhiteSpace(Reason)) return "A reason is needed; it goes into the record.";
            return AltersResult && !Confirmed ? "This alters the converged result: confirm it a second time." : null;
        }
    }

    /// <summary>The body to publish: only what changes.</summary>
    public SettingsProposal Proposal() => new()
    {
        Settings = Merged,
        Commands = GivenCommands,
        Reason = Reason.Trim(),
        Confirm = AltersResult ? true : null,
        FallbackTo = FallBack ? MadeFrom : null,
    };

    /// <summary>The proposal that takes a revision back: the settings before it, with every value that differs.</summary>
    public static SettingsProposal Undo(SettingsRevision last, SettingsRevision before)
    {
        ArgumentNullException.ThrowIfNull(last);
        ArgumentNullException.ThrowIfNull(before);
        var differing = SettingKind.All.Where(k => k.Get(before.Settings) is not null && k.Get(before.Settings) != k.Get(last.Settings)).ToArray();
        return new SettingsProposal
        {
            Settings = differing.Select(k => k.Make(k.Get(before.Settings)!)).OfType<CouplingSettings>().Aggregate(new CouplingSettings(), (all, one) => all.With(one)),
            Reason = $"undo of revision {last.Revision}: back to revision {before.Revision}",
            Confirm = differing.Any(k => k.AltersResult) ? true : null,
        };
    }

    public static string Range(NumberRange range) => $"{SettingKind.Exact(range.Low)} to {SettingKind.Exact(range.High)}";

    private CouplingSettings Merged => Touched.Select(k => k.Make(Text(k))).OfType<CouplingSettings>().Aggregate(new CouplingSettings(), (all, one) => all.With(one));

    private IEnumerable<SettingKind> Touched => SettingKind.All.Where(k => typed.ContainsKey(k.Name));
}
