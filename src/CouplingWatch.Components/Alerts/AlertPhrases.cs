using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Alerts;

/// <summary>Sentences of the alert list that the alert itself does not bring. Pure.</summary>
public static class AlertPhrases
{
    /// <summary>What the run does, to stand after its name: <c>diverges</c>, <c>is silent</c>.</summary>
    public static string Does(Alert alert)
    {
        ArgumentNullException.ThrowIfNull(alert);
        return alert.Check switch
        {
            "divergence" => "diverges",
            "silent" => "is silent",
            "hang" => "hangs inside a solver",
            "starved" => "loses time",
            "polluted" => "has a polluted basis",
            "slow" => "is slow",
            "stall" => "stalls",
            "noise-floor" => "stands on its noise floor",
            "oscillation" => "oscillates",
            "stale" => "runs on stale history",
            "capped" => "gave up a step",
            "unconverged-run" => "gives up its steps",
            "drift" => "drifts",
            "false-claim" => "claims more than it reached",
            "unequal-fields" => "has unequal fields",
            _ => alert.Check,
        };
    }

    /// <summary>What to do where the monitor has no move to propose; null: look at the run.</summary>
    public static string? WithoutAdvice(Alert alert)
    {
        ArgumentNullException.ThrowIfNull(alert);
        return alert.Check switch
        {
            "silent" => "Look at the machine and at the job.",
            "hang" => "Look at the solver named.",
            "false-claim" => "The code stops on another tolerance than it declares: compare the two.",
            "drift" => "Ask what changed: load, contact, mesh, time step.",
            _ => null,
        };
    }

    /// <summary>What is lost if nobody does anything, from the run's own stake.</summary>
    public static string IfNothing(Alert alert, RunSummary? run)
    {
        ArgumentNullException.ThrowIfNull(alert);
        if (!AlertGroups.Open(alert)) return "Nothing is lost; it stays in this list until somebody has read it.";
        if (run is null) return "Not known: the run is not on the board.";
        if (run.State is not ("live" or "quiet")) return "Nothing more: the run has ended.";
        if (run.NodeHoursAtStake is { } stake)
            return stake == 0 ? "No node-hours, as far as the forecast reaches." : $"{Numbers.NodeHours(stake)} of the {(run.NodeHoursLeft is { } left ? $"{Numbers.Hours(left)} " : "")}it can still spend{Fit(run)}.";
        return run.Nodes is null ? $"Node-hours not known: the run does not say how many nodes it holds{Fit(run)}." : $"Node-hours not known yet{Fit(run)}.";
    }

    private static string Fit(RunSummary run) => run.Forecast?.StepsThatDoNotFit is { } steps and >= 0.5 ? $", and about {Numbers.Count((long)Math.Round(steps), "step")} too few in this allocation" : "";
}
