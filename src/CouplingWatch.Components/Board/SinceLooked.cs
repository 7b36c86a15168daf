using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Board;

/// <summary>One thing that happened: the run, what it did (a phrase that goes on after its name), when.</summary>
public sealed record Happening(string Run, string Phrase, DateTimeOffset At);

/// <summary>What changed since the reader last looked, newest first, one phrase a run. Derived from alerts, revisions, given-up steps and closes. Pure.</summary>
public static class SinceLooked
{
    /// <summary>At most this many are told; the rest is counted.</summary>
    public const int Most = 6;

    public static IReadOnlyList<Happening> Of(IReadOnlyList<RunSummary> runs, IReadOnlyList<Alert> alerts, DateTimeOffset lookedAt, DateTimeOffset now, TimeZoneInfo? zone = null)
    {
        ArgumentNullException.ThrowIfNull(runs);
        ArgumentNullException.ThrowIfNull(alerts);
        var all = new List<Happening>();
        foreach (var run in runs)
        {
            var own = alerts.Where(a => a.Run == run.Run && a.Cause is null && a.RaisedAt > lookedAt).ToList();
            var told = Phrases(run, own, lookedAt, now, zone).OrderByDescending(p => p.At).Take(2).ToList();
            if (told.Count > 0) all.Add(new(run.Run, string.Join(" and ", told.Select(p => p.Text)), told[0].At));
        }
        return [.. all.OrderByDescending(h => h.At).ThenBy(h => h.Run, StringComparer.Ordinal)];
    }

    /// <summary>The first step that was complete after the reader last looked; null when all of them were (or none).</summary>
    public static int? FirstStep(RunSummary run, DateTimeOffset? lookedAt)
    {
        ArgumentNullException.ThrowIfNull(run);
        if (lookedAt is not { } looked) return null;
        foreach (var bar in run.Strip)
            if (bar.At > looked) return bar.FromStep;
        return null;
    }

    private static IEnumerable<(string Text, DateTimeOffset At)> Phrases(RunSummary run, IReadOnlyList<Alert> alerts, DateTimeOffset looked, DateTimeOffset now, TimeZoneInfo? zone)
    {
        if (alerts.Count == 0 && !LaneOrder.Closed(run) && run.Strip.Count > 0 && run.Strip[0] is { FromStep: 0, At: { } first } && first > looked)
            yield return ($"completed its first step at {Times.Near(first, now, zone)}", first);
        foreach (var alert in alerts)
            yield return ($"{Verb(alert.Check)} at {Times.Near(alert.RaisedAt!.Value, now, zone)}", alert.RaisedAt.Value);
        var saidBy = alerts.Any(a => a.Check is "capped" or "unconverged-run");
        foreach (var bar in run.Strip)
        {
            if (bar.At is not { } at || at <= looked) continue;
            if (bar.Revision is { } revision) yield return ($"took over revision {revision} at step {Numbers.Count(bar.FromStep)}", at);
            if (bar.Unconverged > 0 && !saidBy) yield return (GaveUp(bar), at);
        }
        if (LaneOrder.Closed(run) && run.LastRecordAt is { } closed && closed > looked) yield return ($"{Close(run.State)} at {Times.Near(closed, now, zone)}", closed);
    }

    private static string GaveUp(StripBar bar) => bar.FromStep == bar.ToStep
        ? $"gave up step {Numbers.Count(bar.FromStep)}"
        : $"gave up {Numbers.Count(bar.Unconverged, "step")} from step {Numbers.Count(bar.FromStep)} on";

    private static string Verb(string check) => check switch
    {
        "divergence" => "began to diverge",
        "silent" => "fell silent",
        "hang" => "hung inside a solver",
        "starved" => "starved its basis",
        "polluted" => "polluted its basis",
        "slow" => "slowed down",
        "stall" => "stalled",
        "noise-floor" => "met its noise floor",
        "oscillation" => "began to oscillate",
        "stale" => "ran on stale history",
        "capped" => "gave up a step",
        "unconverged-run" => "gave up two steps in a row",
        "drift" => "began to drift",
        "false-claim" => "claimed a step that had not converged",
        "unequal-fields" => "showed unequal fields",
        _ => $"raised {check}",
    };

    private static string Close(string state) => state switch
    {
        "finished" => "finished",
        "aborted" => "was aborted",
        "diverged" => "closed as diverged",
        _ => "stopped",
    };
}
