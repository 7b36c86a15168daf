using CouplingWatch.Components.Parts;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.RunPage;

/// <summary>What is in force, and what became of the newest revision.</summary>
public static class SettingsAnswer
{
    public static Answer Of(RunDetail run)
    {
        ArgumentNullException.ThrowIfNull(run);
        if (run.Revisions.LastOrDefault(r => r.Revision > 0) is not { } last)
            return new Answer(StateMark.OnCourse, run.Adjustable.IsEmpty ? "As it started; nothing was declared adjustable." : "As it started: no revision was published.");
        return last.State switch
        {
            RevisionState.Published => new Answer(StateMark.Dearer, $"Revision {last.Revision} is published; the run has not read it yet."),
            RevisionState.PickedUp => new Answer(StateMark.Dearer, $"Revision {last.Revision} was read; it holds from the next step on."),
            RevisionState.Refused => new Answer(StateMark.GaveUp, $"Revision {last.Revision} was refused: {last.Refused ?? "no reason was given"}."),
            RevisionState.Withdrawn => new Answer(StateMark.OnCourse, $"Revision {last.Revision} was withdrawn before the run read it."),
            _ when last.Effect is null => new Answer(StateMark.Learning, $"Revision {last.Revision} is applied{From(last)}; its effect is being learnt."),
            _ => new Answer(StateMark.Finished, $"Revision {last.Revision} is applied{From(last)}: {Before(last)}."),
        };
    }

    private static string From(SettingsRevision r) => r.FromStep is { } step ? $" from step {step}" : "";

    private static string Before(SettingsRevision r) =>
        $"{Formatting.Numbers.Fixed(r.Effect!.Before)} → {Formatting.Numbers.Fixed(r.Effect.After)} iterations a step, before/after, biased towards improvement";
}
