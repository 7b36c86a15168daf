using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Parts;
using CouplingWatch.Components.RunPage;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Bench;

/// <summary>The answers left of the bench's seam.</summary>
public static class BenchAnswer
{
    /// <summary>What a filter would do to the columns at hand.</summary>
    public static Answer Filter(BasisView? inForce, BasisView? tried)
    {
        if (inForce is null) return new Answer(StateMark.NotJudged, "No basis to try a filter on.");
        if (inForce.Columns.Count == 0) return new Answer(StateMark.Learning, "No column yet to try a filter on.");
        if (tried is null || (tried.Rule == inForce.Rule && tried.Threshold.Equals(inForce.Threshold)))
            return new Answer(StateMark.OnCourse, $"As it is, {inForce.Columns.Count - inForce.Kept} of {Numbers.Count(inForce.Columns.Count, "column")} are left out.");
        return new Answer(StateMark.Dearer, $"It would leave out {tried.Columns.Count - tried.Kept} of {Numbers.Count(tried.Columns.Count, "column")}, now {inForce.Columns.Count - inForce.Kept}.")
        {
            Notes = [$"Computed on step {tried.Step}, iteration {tried.Iteration}. κ would be {Numbers.Power(tried.ConditionUnit)}; at most {Numbers.Sig(tried.Uncovered, 2)} of the residual would be left over, now {Numbers.Sig(inForce.Uncovered, 2)}."],
        };
    }

    /// <summary>What the rehearsal found.</summary>
    public static Answer Rehearsal(RehearsalView? view, bool offered)
    {
        if (!offered) return new Answer(StateMark.NotJudged, "This host offers no rehearsal.");
        if (view is null) return new Answer(StateMark.Learning, "Nothing is rehearsed yet.") { Notes = ["A rehearsal replays the recorded steps under other settings. It orders and screens candidates; the race decides."] };
        if (!view.Calibration.Trusted) return new Answer(StateMark.NotJudged, $"No ranking: {view.Calibration.Why ?? "the replay does not match the recording"}.");
        if (view.Proposal is not { } best)
            return new Answer(StateMark.OnCourse, view.Candidates.Count == 0 ? "No candidate was rehearsed." : "Nothing clearly better was found: keep what is in use.");
        return new Answer(StateMark.Dearer, $"{Capital(SettingsWords.Of(best.Settings))}: {Numbers.Fixed(best.Mean)} iterations a step instead of {Numbers.Fixed(view.Calibration.Rehearsed)}.")
        {
            Notes = ["Proposed, because it lies 15 % or more below the present settings. Let a race decide."],
        };
    }

    /// <summary>Where the race stands.</summary>
    public static Answer Race(RaceView? race, bool offered)
    {
        if (race is null) return offered ? new Answer(StateMark.Learning, "No race was run yet.") : new Answer(StateMark.NotJudged, "This host offers no race.");
        if (race.Verdict is { } verdict)
            return new Answer(verdict.Code == "publish" ? StateMark.Finished : verdict.Code == "fell-back" ? StateMark.GaveUp : StateMark.OnCourse, Answer.Sentence(verdict.Text)) { Notes = Effect(verdict.Effect) };
        return new Answer(race.State == RaceState.Stopped ? StateMark.NotJudged : StateMark.Learning, Answer.Sentence(race.Text));
    }

    /// <summary>"−7.0 iterations a step (−7.3 to −6.7)" with what the interval rests on; empty without an effect.</summary>
    public static IReadOnlyList<string> Effect(RaceEffect? effect)
    {
        if (effect is null) return [];
        var interval = effect is { Low: { } low, High: { } high } ? $" ({Signed(low)} to {Signed(high)}{(effect.Level is { } level ? $", {Numbers.Percent(level)} interval" : "")})" : " (too few rounds for an interval)";
        var notes = new List<string> { $"{Signed(effect.Mean)} a step against the settings in use{interval}, from {Numbers.Count(effect.Rounds, "paired round")}." };
        if (effect.ChosenAmong > 1) notes.Add($"It was chosen among {effect.ChosenAmong} challengers, so the interval flatters it.");
        return notes;
    }

    private static string Signed(double value) => value > 0 ? "+" + Numbers.Fixed(value) : Numbers.Fixed(value);

    private static string Capital(string text) => text.Length == 0 ? text : char.ToUpperInvariant(text[0]) + text[1..];
}
