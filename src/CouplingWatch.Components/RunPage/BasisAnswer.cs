using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Ledger;
using CouplingWatch.Components.Parts;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.RunPage;

/// <summary>"Is the basis sound?"</summary>
public static class BasisAnswer
{
    public static Answer Of(RunDetail run)
    {
        ArgumentNullException.ThrowIfNull(run);
        if (run.Basis is not { } basis)
            return run.Settings.Method is Records.CouplingMethod.Fixed or Records.CouplingMethod.Aitken
                ? new Answer(StateMark.NotJudged, "There is none: the method in use relaxes without a basis.")
                : Answer.NotJudged(run, "Not judged with what this run sends.", "conditioning", "starved", "polluted", "spectrum");
        if (basis.Columns.Count == 0)
            return new Answer(StateMark.Learning, "No column yet: the first update is a relaxation.") { Facts = Facts(basis) };

        var left = basis.Columns.Count - basis.Kept;
        var live = basis.Columns.Count(c => c.Birth.Step == basis.Step);
        var liveKept = basis.Columns.Count(c => c.Kept && c.Birth.Step == basis.Step);
        var alert = Answer.Open(run, "starved", "polluted", "stale");
        var kept = $"{basis.Kept} of {Numbers.Count(basis.Columns.Count, "column")} {(basis.Kept == 1 ? "is" : "are")} kept";
        var say = alert?.Check switch
        {
            "starved" => $"No, starved: {kept}, {Numbers.Word(liveKept)} of this step.",
            "polluted" => $"No, polluted: it promises what does not come; {kept}.",
            "stale" => $"No, stale: columns of earlier steps mislead; {kept}.",
            _ when left == 0 => $"Yes: all {Numbers.Count(basis.Columns.Count, "column")} are kept.",
            _ => $"Yes: {kept}{Which(basis, left)}.",
        };
        var notes = new List<string>();
        if (alert is not null) notes.Add(Answer.Sentence(alert.Text));
        else if (live > 0 && liveKept == live) notes.Add("No column of the present step is left out, so the basis is not starved.");
        if (alert?.Check == "starved" && basis.Rule == Records.FilterRule.PivotRatio)
            notes.Add("Under pivot-ratio a column goes as soon as it is small beside the largest, and near convergence every new column is small.");
        notes.Add("κ is shown for the reader who wants it. It separates no good run from a bad one, so nothing here alarms on it.");
        return new Answer(alert is null ? StateMark.OnCourse : StateMarks.Of(alert), say) { Notes = notes, Facts = Facts(basis) };
    }

    private static string Which(BasisView basis, int left)
    {
        var old = basis.Columns.Count(c => !c.Kept && c.Birth.Step != basis.Step);
        return old == left ? $"; the {Numbers.Count(left)} left out {(left == 1 ? "belongs" : "belong")} to earlier steps" : "";
    }

    private static IReadOnlyList<Fact> Facts(BasisView basis) =>
    [
        new("rule", LedgerRows.Named(basis.Rule)),
        new("threshold in force", Numbers.Power(basis.Threshold)),
        new(basis.DeclaredNoise is { } noise ? $"least advised, from noise {Numbers.Power(noise)}" : "least advised, noise not declared", Numbers.Power(basis.AdvisedThreshold), basis.AdvisedThreshold is null ? "the rule in use is the code's own" : null),
        new("κ, unit columns", Numbers.Power(basis.ConditionUnit, 3), basis.ConditionUnit is null ? "no column is kept" : null),
        new("coefficient error, at most", Numbers.Power(basis.CoefficientError), basis.CoefficientError is null ? "no solver declares its noise" : null),
        new("rests on", basis.Source switch { "vectors" => "full vectors", "sketch" => "sketches", _ => "the code's own factor" }),
    ];
}
