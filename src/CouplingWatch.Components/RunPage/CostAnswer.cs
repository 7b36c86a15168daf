using CouplingWatch.Components.Formatting;
using CouplingWatch.Components.Parts;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.RunPage;

/// <summary>"What does it cost?"</summary>
public static class CostAnswer
{
    public static Answer Of(RunDetail run, DateTimeOffset now, TimeZoneInfo? zone = null)
    {
        ArgumentNullException.ThrowIfNull(run);
        if (run.Cost is not { } cost)
            return Answer.NotJudged(run, "Not known: this run sends no seconds.", "cost", "budget", "forecast");
        var s = run.Summary;
        var late = s.Forecast is { Ends: { } e } && s.AllocationEndsAt is { } a && e > a;
        var parts = new List<string>();
        if (cost.NodeHoursSpent is { } spent) parts.Add($"{Numbers.NodeHours(spent)} so far{(s.NodeHoursLeft is { } left && s.State == "live" ? $", {Numbers.Hours(left)} to go" : "")}");
        else if (cost.PassSeconds is { } pass) parts.Add($"{Seconds(pass)} a pass, {Numbers.Count(cost.Passes, "pass", "passes")} so far");
        if (s.State == "live" && s.Forecast?.Ends is { } ends)
            parts.Add($"it ends {Times.Near(ends, now, zone)}{(s.AllocationEndsAt is null ? "" : late ? ", after this allocation" : ", in this allocation")}");
        var say = parts.Count == 0 ? "Not known yet." : Answer.Sentence(string.Join("; ", parts));
        var mark = late ? StateMark.LosingTime : parts.Count == 0 ? StateMark.Learning : s.State is "finished" or "stopped" ? StateMark.Finished : StateMark.OnCourse;
        var notes = new List<string>();
        if (s.Forecast is { } f && s.State == "live") notes.Add(f.Text);
        if (cost.LostText is { Length: > 0 } lost) notes.Add(Answer.Sentence(lost));
        notes.Add(Answer.Sentence(cost.SurrogateText));
        return new Answer(mark, say) { Notes = notes, Facts = Facts(run, cost) };
    }

    private static IReadOnlyList<Fact> Facts(RunDetail run, CostView cost)
    {
        const string noNodes = "the run sends no nodes";
        var perSecond = run is { Time: > 0 and var t } && cost.NodeHoursSpent is { } spent ? spent / t : (double?)null;
        return
        [
            new("a pass", Seconds(cost.PassSeconds), cost.PassSeconds is null ? "the run sends no seconds" : null),
            new("per simulated second", Numbers.NodeHours(perSecond), perSecond is null ? cost.NodeHoursSpent is null ? noNodes : "the run sends no time" : null),
            new("lost: redone, rejected, capped", Numbers.NodeHours(cost.NodeHoursLost), cost.NodeHoursLost is null ? noNodes : null),
            new("last checkpoint", cost.LastCheckpointStep is { } at ? $"step {at}" : Numbers.Dash, cost.LastCheckpointStep is null ? "none was sent" : null),
            new("last safe one before the end", cost.LastSafeCheckpointStep is { } safe ? $"step {safe}" : Numbers.Dash, cost.LastSafeCheckpointStep is null ? "no allocation, or no rhythm of checkpoints yet" : null),
            new("jobs still needed", cost.JobsStillNeeded is { } jobs ? (jobs == 0 ? "none" : Numbers.Count(jobs)) : Numbers.Dash, cost.JobsStillNeeded is null ? "no allocation is declared" : null),
        ];
    }

    private static string Seconds(double? seconds) => seconds is { } s && double.IsFinite(s) && s < 1e9 ? Times.Span(TimeSpan.FromSeconds(s)) : Numbers.Dash;

}
