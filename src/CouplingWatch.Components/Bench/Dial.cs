using System.Globalization;
using CouplingWatch.Components.Ledger;
using CouplingWatch.Components.SettingsForm;

namespace CouplingWatch.Components.Bench;

/// <summary>A choice of a dial: its value in the stream and the word of the page.</summary>
public sealed record DialChoice(string Value, string Words);

/// <summary>One dial of the bench: a slider from <see cref="Low"/> to <see cref="High"/>, or choices.</summary>
public sealed record Dial(SettingKind Kind, double Low, double High, double Step)
{
    /// <summary>The slider counts decades.</summary>
    public bool Decades { get; init; }

    /// <summary>Choices in place of a slider; null for numbers.</summary>
    public IReadOnlyList<DialChoice>? Choices { get; init; }

    /// <summary>The dials of the bench, in their order.</summary>
    public static IReadOnlyList<Dial> All { get; } =
    [
        new(SettingKind.Named("relaxation")!, 0.01, 1, 0.01),
        new(SettingKind.Named("filterRule")!, 0, 0, 0) { Choices = [new("own-norm", "own-norm"), new("pivot-ratio", "pivot-ratio"), new("none", "none")] },
        new(SettingKind.Named("filterThreshold")!, -12, -0.5, 0.1) { Decades = true },
        new(SettingKind.Named("historySteps")!, 0, 40, 1),
        new(SettingKind.Named("predictorOrder")!, 0, 0, 0) { Choices = [new("0", "constant"), new("1", "linear"), new("2", "quadratic")] },
        new(SettingKind.Named("method")!, 0, 0, 0) { Choices = [new("fixed", "fixed"), new("aitken", "aitken"), new("iqn-ils", "iqn-ils"), new("iqn-ilsm", "iqn-ilsm")] },
    ];

    /// <summary>Where the slider stands for a typed value; the low end where it is not understood.</summary>
    public string Position(string text)
    {
        var value = SettingKind.Read(text) ?? (Decades ? 0 : Low);
        var at = Decades ? ThresholdText.Decades(value, Low) : value;
        return Math.Clamp(at, Low, High).ToString("0.##", CultureInfo.InvariantCulture);
    }

    /// <summary>What the field shows for a slider position.</summary>
    public string Text(double position) =>
        Decades ? ThresholdText.Typed(ThresholdText.At(position)) : SettingKind.Plain(Math.Round(position / Step) * Step is var v && Kind.Whole ? Math.Round(v) : Math.Round(v, 4));
}
