using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Parts;
using CouplingWatch.Components.SettingsForm;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.RunPage;

/// <summary>"What does a pass do?"</summary>
public static class SpectrumAnswer
{
    public static Answer Of(RunDetail run)
    {
        ArgumentNullException.ThrowIfNull(run);
        if (run.Spectrum is not { Values.Count: > 0 } s)
            return run.Spectrum?.Why is { Length: > 0 } why
                ? new Answer(StateMark.Learning, Answer.Sentence(why))
                : Answer.NotJudged(run, "Not judged with what this run sends.", "spectrum");

        var wild = s.Values.Where(v => !v.Tamed).ToArray();
        var relaxes = run.Settings.Method is CouplingMethod.Fixed or CouplingMethod.Aitken;
        var by = s.RelaxationInForce is { } w ? $" by relaxation {SettingKind.Exact(w)}" : "";
        var reach = Math.Max(Math.Abs(s.LambdaMin ?? 0), Math.Abs(s.LambdaMax ?? 0));
        var say = wild.Length == 0
            ? $"Nothing unusual: all {Numbers.Count(s.Directions, "direction")} seen are tamed{by}."
            : $"It throws the residual back {Numbers.Sig(reach, 2)}-fold: {wild.Length} of {Numbers.Count(s.Values.Count, "direction")} seen are not tamed{by}.";
        var notes = new List<string>();
        if (wild.Length > 0)
            notes.Add(relaxes ? "The method in use relaxes every update, so these directions grow." : "This matters only where the update is a relaxation: the first pass before any column.");
        if (s.RelaxationLimit is { } limit) notes.Add($"Relaxation alone would have to stay below {Numbers.Sig(limit)} for the directions seen; one not yet seen may ask for less.");
        else if (s.Why is { Length: > 0 } why) notes.Add(Answer.Sentence(why));
        var mark = wild.Length == 0 ? StateMark.OnCourse : relaxes ? StateMark.Diverging : StateMark.Dearer;
        return new Answer(mark, say) { Notes = notes, Facts = Facts(s) };
    }

    private static IReadOnlyList<Fact> Facts(SpectrumView s) =>
    [
        new("directions kept", Numbers.Count(s.Directions)),
        new("λ from", s is { LambdaMin: { } low, LambdaMax: { } high } ? $"{Numbers.Sig(low, 4)} to {Numbers.Sig(high, 2)}" : Numbers.Dash, s.LambdaMin is null ? "fewer than five directions were seen" : null),
        new("largest that tames them", Numbers.Sig(s.RelaxationLimit), s.RelaxationLimit is null ? s.Why ?? "not to be told from the directions seen" : null),
        new("best constant", Numbers.Sig(s.RelaxationBest), s.RelaxationBest is null ? s.Why ?? "not to be told from the directions seen" : null),
    ];
}
