using CouplingWatch.Monitoring.Checks;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>Writes the state of every check: raised, ok, learning, or not judged.</summary>
internal static class HealthWriter
{
    private static readonly string[] ComparesWithHistory = [CheckIds.Stale, CheckIds.Drift, CheckIds.UnequalFields];

    public static IReadOnlyList<CheckHealth> Write(RunMonitor monitor)
    {
        List<CheckHealth> all = [];
        var lacking = monitor.NotJudged;
        foreach (var check in monitor.Checks)
        {
            var lack = lacking.FirstOrDefault(l => l.Check == check.Id);
            if (monitor.AlertBook.Open(check.Id) is { Held: false } open) all.Add(new CheckHealth(check.Id, "raised", open.Alert.Text, (System.Text.Json.Nodes.JsonObject)open.Alert.Evidence.DeepClone()));
            else if (lack is not null) all.Add(new CheckHealth(check.Id, "not-judged", $"{lack.Why}; send {lack.Send}"));
            else if (monitor.State.Learning.Holds && ComparesWithHistory.Contains(check.Id)) all.Add(new CheckHealth(check.Id, "learning", $"{monitor.State.Learning.StepsDone} of {State.Learning.Steps} steps seen"));
            else all.Add(new CheckHealth(check.Id, "ok", ""));
        }
        return all;
    }
}
