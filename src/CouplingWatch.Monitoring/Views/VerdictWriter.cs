using CouplingWatch.Monitoring.Checks;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>The state of a run in one sentence: the first cause among the standing alerts, else how it goes.</summary>
internal static class VerdictWriter
{
    public static Verdict Write(RunMonitor monitor)
    {
        var run = monitor.State;
        Alert? first = null;
        foreach (var alert in monitor.Alerts)
            if (alert.ClosedSeq is null && alert.State != AlertState.Shelved && (first is null || CheckIds.Rank(alert.Check) < CheckIds.Rank(first.Check))) first = alert;
        if (run.Close is { } close) return Closed(close, run, first);
        if (first is not null) return new Verdict(CodeOf(first.Check), WordOf(first.Check), Pace(run, first) + first.Text, first.Severity, first.Step);
        if (run.Iterations == 0) return new Verdict("not-judged", "Not judged", "nothing but the opening has come yet");
        if (run.Learning.Holds && !run.Steady) return new Verdict("learning", "Learning", $"{run.Learning.StepsDone} of {Learning.Steps} steps seen");
        var gaveUp = run.StepsCapped + run.StepsFailed;
        var done = $"{Say.Count(run.StepsComplete, "step", "steps")} complete" + (gaveUp == 0 ? "" : $", {gaveUp} of them given up");
        return new Verdict("on-course", "On course", run.StepsComplete == 0 ? Recent(run) : $"{Recent(run)}; {done}.");
    }

    /// <summary>"11.8 iterations a step. " where the first cause costs iterations and steps are there to count.</summary>
    private static string Pace(RunState run, Alert alert) => CodeOf(alert.Check) == "losing-time" && run.Counts.Count > 0 ? Recent(run) + ". " : "";

    private static string Recent(RunState run)
    {
        if (run.Counts.Count == 0) return run.StepsComplete == 0 ? "no step is complete yet" : $"{(double)run.IterationsInSteps / run.StepsComplete:0.0} iterations a step";
        var sum = 0.0;
        for (var i = 0; i < run.Counts.Count; i++) sum += run.Counts[i];
        return string.Create(System.Globalization.CultureInfo.InvariantCulture, $"{sum / run.Counts.Count:0.0} iterations a step{(run.Counts.IsFull ? " over the last ten" : "")}");
    }

    private static Verdict Closed(CloseRecord close, RunState run, Alert? first)
    {
        var steps = Say.Count(run.StepsComplete, "step", "steps");
        return close.Outcome switch
        {
            CloseOutcome.Finished => new Verdict("finished", "Finished", $"{steps}, {run.StepsCapped + run.StepsFailed} without convergence", first?.Severity),
            CloseOutcome.Diverged => new Verdict("diverged", "Diverged", first?.Text ?? $"closed as diverged after {steps}", Severity.Critical),
            CloseOutcome.Aborted => new Verdict("aborted", "Aborted", close.Reason ?? $"after {steps}", first?.Severity),
            _ => new Verdict("stopped", "Stopped", close.Reason ?? $"after {steps}", first?.Severity),
        };
    }

    private static string CodeOf(string check) => check switch
    {
        CheckIds.Divergence => "diverging",
        CheckIds.UnconvergedRun or CheckIds.Capped => "gave-up",
        CheckIds.Silent or CheckIds.Hang => "silent",
        CheckIds.Drift or CheckIds.UnequalFields => "dearer",
        _ => "losing-time",
    };

    private static string WordOf(string check) => CodeOf(check) switch
    {
        "diverging" => "Diverging",
        "gave-up" => "Gave up",
        "silent" => "Silent",
        "dearer" => "Dearer",
        _ => "Losing time",
    };
}
