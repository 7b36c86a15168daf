using CouplingWatch.Wire;

namespace CouplingWatch.Components.SettingsForm;

/// <summary>An advice as the form takes it over.</summary>
public static class AdvisedChange
{
    /// <summary>True when the advice is a value or a command that the run declared adjustable, so that it can be published from the page.</summary>
    public static bool CanPublish(Advice advice, Records.AdjustableSettings adjustable)
    {
        ArgumentNullException.ThrowIfNull(advice);
        ArgumentNullException.ThrowIfNull(adjustable);
        return advice.Adjustable && adjustable.Allows(advice.Setting) && (adjustable.Commands.Contains(advice.Setting) || Values(advice).Any());
    }

    /// <summary>Writes the advice into a draft, with its own sentence as the reason to begin with.</summary>
    public static void Into(SettingsDraft draft, Advice advice)
    {
        ArgumentNullException.ThrowIfNull(draft);
        ArgumentNullException.ThrowIfNull(advice);
        if (draft.Adjustable.Commands.Contains(advice.Setting)) draft.Command(advice.Setting, true);
        foreach (var (kind, text) in Values(advice).Where(v => draft.Adjustable.Allows(v.Kind.Name))) draft.Type(kind, text);
        if (draft.Reason.Length == 0) draft.Reason = "as advised: " + advice.Text;
    }

    /// <summary>What the button says: "Publish threshold 10⁻⁷".</summary>
    public static string Button(Advice advice) =>
        Values(advice).Select(v => v.Kind.Make(v.Text) is { } s ? $"{v.Kind.Words} {v.Kind.Shown(s)}" : v.Kind.Words).ToArray() is { Length: > 0 } all
            ? "Publish " + string.Join(", ", all)
            : "Publish " + advice.Setting;

    private static IEnumerable<(SettingKind Kind, string Text)> Values(Advice advice)
    {
        if (SettingKind.Named(advice.Setting) is { } kind && (advice.To ?? Number(advice)) is { } text && kind.Make(text) is not null) yield return (kind, text);
        if (advice is { Setting: "filterRule", Value: { } threshold }) yield return (SettingKind.Named("filterThreshold")!, SettingKind.Plain(threshold));
    }

    private static string? Number(Advice advice) => advice.Value is { } v ? SettingKind.Plain(v) : null;
}
