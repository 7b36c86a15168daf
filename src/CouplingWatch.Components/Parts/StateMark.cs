using CouplingWatch.Wire;

namespace CouplingWatch.Components.Parts;

/// <summary>The nine shapes a state can take, as a sign (two strokes) and as a seam (two lines).</summary>
public enum StateMark { OnCourse, Learning, Dearer, LosingTime, Diverging, GaveUp, Silent, NotJudged, Finished }

/// <summary>Which mark belongs to a verdict or an alert, and the colour class that goes with it.</summary>
public static class StateMarks
{
    /// <summary>The mark of a verdict by its stable code. An unknown code is not judged, never "on course".</summary>
    public static StateMark Of(Verdict verdict)
    {
        ArgumentNullException.ThrowIfNull(verdict);
        return verdict.Code switch
        {
            "on-course" => StateMark.OnCourse,
            "learning" => StateMark.Learning,
            "dearer" => StateMark.Dearer,
            "losing-time" => StateMark.LosingTime,
            "diverging" or "diverged" => StateMark.Diverging,
            "gave-up" or "aborted" => StateMark.GaveUp,
            "silent" => StateMark.Silent,
            "finished" or "stopped" => StateMark.Finished,
            _ => StateMark.NotJudged,
        };
    }

    /// <summary>The mark of an alert: by its check where that has a shape of its own, else by its severity; one that returned is met.</summary>
    public static StateMark Of(Alert alert)
    {
        ArgumentNullException.ThrowIfNull(alert);
        if (alert.State is AlertState.Returned or AlertState.Closed) return StateMark.Finished;
        return alert.Check switch
        {
            "divergence" => StateMark.Diverging,
            "silent" or "hang" => StateMark.Silent,
            "capped" or "unconverged-run" or "false-claim" => StateMark.GaveUp,
            _ => Of(alert.Severity),
        };
    }

    public static StateMark Of(Severity severity) => severity switch
    {
        Severity.Critical => StateMark.Diverging,
        Severity.Warning => StateMark.LosingTime,
        _ => StateMark.Dearer,
    };

    /// <summary>The class that colours a mark: none but where it claims attention.</summary>
    public static string Class(StateMark mark) => mark switch
    {
        StateMark.Dearer => "is-note",
        StateMark.LosingTime => "is-slow",
        StateMark.Diverging or StateMark.GaveUp => "is-bad",
        StateMark.Silent => "is-quiet",
        StateMark.Finished => "is-met",
        _ => "is-plain",
    };

    /// <summary>True when the state asks something of the reader: such a lane is drawn large, the others calm.</summary>
    public static bool Asks(StateMark mark) =>
        mark is StateMark.Dearer or StateMark.LosingTime or StateMark.Diverging or StateMark.GaveUp or StateMark.Silent;
}
