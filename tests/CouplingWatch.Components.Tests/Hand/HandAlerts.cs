using System.Text.Json.Nodes;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Hand;

/// <summary>Alerts by hand, one in each state.</summary>
public static class HandAlerts
{
    public static Alert Divergence(DateTimeOffset now) => Of("leaf95-1", "divergence", Severity.Critical, 0, 6, 7, now.AddMinutes(-18),
        "the residual is 2,381 times its least value and grows by a factor of 2.05 an iteration.",
        new JsonObject { ["growthDecades"] = 3.38, ["slopeOfFive"] = 0.312, ["relaxation"] = 0.30, ["relaxationLimit"] = 0.197, ["norms"] = Array(4.2e-4, 3.1e-4, 6.6e-4, 1.35e-3, 2.8e-3, 5.7e-3, 1.2e-2) });

    public static Alert Silence(DateTimeOffset now) => Of("leaf80-5", "silent", Severity.Warning, 10, 0, 59, now.AddMinutes(-21),
        "nothing has come for 47 min; its gaps are 2.6 min.", new JsonObject { ["secondsSilent"] = 2820, ["limitSeconds"] = 1560, ["medianGapSeconds"] = 156 });

    public static Alert Starved(DateTimeOffset now) => Of("leaf80-3", "starved", Severity.Warning, 0, 8, 9, now.AddMinutes(-75),
        "its basis is starved: the newest column was left out of each of the last five updates.",
        new JsonObject { ["kept"] = 5, ["columns"] = 49, ["threshold"] = 1e-2, ["rule"] = "pivot-ratio", ["uncovered"] = 0.33 }) with
    {
        State = AlertState.Acknowledged,
        AcknowledgedBy = "night shift",
        AcknowledgedAt = now.AddMinutes(-72),
        LastStep = 16,
        LastSeq = 171,
        Advice = ["a-threshold"],
    };

    public static Alert SlowBecauseStarved(DateTimeOffset now) => Of("leaf80-3", "slow", Severity.Warning, 16, 12, 164, now.AddMinutes(-20),
        "step 16 falls too slowly to meet its target before the cap of 40.", new JsonObject { ["fallingShare"] = 1.0, ["improvement"] = 0.21 }) with
    { Cause = "leaf80-3/starved/9" };

    public static Alert Unequal(DateTimeOffset now) => Of("plate-7", "unequal-fields", Severity.Note, 10, 12, 140, now.AddMinutes(-190),
        "the deflection arrives 3.5 iterations after the wall temperature, in every step.", new JsonObject { ["medianLateness"] = 3.5, ["limit"] = 2.5 }) with
    {
        State = AlertState.Acknowledged,
        AcknowledgedBy = "day shift",
        AcknowledgedAt = now.AddMinutes(-188),
    };

    public static Alert Unconverged(DateTimeOffset now) => Of("leaf60-4", "unconverged-run", Severity.Critical, 31, 39, 240, now.AddMinutes(-33),
        "two steps in a row ended at the cap without meeting their target.", new JsonObject { ["steps"] = 2, ["cap"] = 40, ["lastNeed"] = 1.08 });

    /// <summary>One that returned, one that is shelved.</summary>
    public static IReadOnlyList<Alert> Old(DateTimeOffset now) =>
    [
        Of("leaf80-2", "polluted", Severity.Warning, 1, 34, 35, now.AddHours(-15), "11 of 18 promises were broken in step 1; it has kept them since the threshold was raised at step 2.",
            new JsonObject { ["brokenPromises"] = 11, ["promises"] = 18, ["threshold"] = 1e-11 }) with { State = AlertState.Returned, ClosedSeq = 61, LastStep = 4 },
        Of("leaf60-1", "unconverged-run", Severity.Critical, 2, 5, 18, now.AddHours(-30), "every step gives up at the cap of 6.", new JsonObject { ["cap"] = 6 }) with
        {
            State = AlertState.Shelved, ShelvedUntil = now.AddHours(17.5), ShelvedReason = "cap set low on purpose, to compare with case 2",
        },
    ];

    public static Alert Of(string run, string check, Severity severity, int step, int iteration, long seq, DateTimeOffset raised, string text, JsonObject evidence) => new()
    {
        Id = $"{run}/{check}/{seq}",
        Run = run,
        Check = check,
        Severity = severity,
        RaisedAt = raised,
        Step = step,
        Iteration = iteration,
        Seq = seq,
        LastSeq = seq,
        LastStep = step,
        Text = text,
        Evidence = evidence,
    };

    private static JsonArray Array(params double[] values) => [.. values.Select(v => (JsonNode)v)];
}
