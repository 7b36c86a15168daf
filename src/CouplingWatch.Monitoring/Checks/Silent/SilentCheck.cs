using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Silent;

/// <summary>No record for much longer than usual. Level 0. Seen at the late record, by the server's clock, or at the end of a recording that was not closed.</summary>
internal static class SilentCheck
{
    public static Finding Late(double seconds, double? limit)
    {
        var evidence = new JsonObject { ["secondsSilent"] = seconds };
        if (limit is not null) evidence["limitSeconds"] = limit;
        return new Finding(CheckIds.Silent, Severity.Warning,
            $"No record came for {Say.Seconds(seconds)}{(limit is { } l ? $"; after {Say.Seconds(l)} this run counts as silent" : "")}.", evidence, Certain: true);
    }

    public static Finding Ended(RunState run)
    {
        var where = run.Step.Step < 0 ? "before the first iteration"
            : run.Step.InProgress ? $"in step {run.Step.Step}, after iteration {run.Step.Iteration}" : $"after step {run.Step.Step}";
        return new Finding(CheckIds.Silent, Severity.Warning,
            $"The recording ends {where} without a close record: the run was cut off or still went on.",
            new JsonObject { ["lastStep"] = run.Step.Step, ["lastIteration"] = run.Step.Iteration }, Certain: true);
    }
}
