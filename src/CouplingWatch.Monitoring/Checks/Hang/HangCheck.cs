using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Hang;

/// <summary>A solver has been inside one pass for far longer than its passes take. Level 0 with beats; seen by the server's clock.</summary>
internal sealed class HangCheck : ICheck
{
    public string Id => CheckIds.Hang;

    /// <summary>A beat that says so itself, as recordings hold them; null when it does not.</summary>
    public static Finding? Of(RunState run, BeatRecord beat)
    {
        if (beat.In is not { } solver || beat.InsideSeconds is not { } inside) return null;
        var limit = run.Times.HangLimit(solver);
        return inside > limit ? Hanging(new HangEvent(solver, inside, limit) { At = run.At }) : null;
    }

    public static Finding Hanging(HangEvent e) => new(CheckIds.Hang, Severity.Critical,
        $"{e.Solver} has been inside one pass for {Say.Seconds(e.InsideSeconds)}; from {Say.Seconds(e.LimitSeconds)} on it counts as hanging.",
        new JsonObject { ["solver"] = e.Solver, ["insideSeconds"] = e.InsideSeconds, ["limitSeconds"] = e.LimitSeconds }, Certain: true);

    public NotJudged? Lacks(RunState run) => run.BeatsSeen || run.Open?.BeatSeconds is not null || run.Iterations == 0
        ? null : new NotJudged(Id, "no beats are sent", "beat records that name the solver at work and since when");
}
