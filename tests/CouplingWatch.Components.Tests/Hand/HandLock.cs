using System.Text.Json.Nodes;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Hand;

/// <summary>Runs of a lock gate and a cold plate by hand, one in each state the board can show. Names, people and figures are invented.</summary>
public static class HandLock
{
    public static readonly DateTimeOffset Now = new(2026, 12, 1, 14, 32, 0, TimeSpan.Zero);

    /// <summary>A feed with every lane, and the alerts that go with them.</summary>
    public static HandFeed Feed(DateTimeOffset? now = null)
    {
        var at = now ?? Now;
        var feed = new HandFeed { LastRecordAt = at.AddSeconds(-2) };
        feed.Runs.AddRange(Lanes(at));
        feed.Alerts.AddRange(feed.Runs.SelectMany(r => r.OpenAlerts));
        feed.Alerts.AddRange(HandAlerts.Old(at));
        return feed;
    }

    public static IReadOnlyList<RunSummary> Lanes(DateTimeOffset now) =>
        [Diverging(now), Silent(now), Losing(now), Dearer(now), GaveUp(now), Restarted(now), Long(now), NotJudged(now), Learning(now), Finished(now)];

    public static RunSummary Diverging(DateTimeOffset now) => Lane("leaf95-1", "leaf 95 mm, case 1", now, 4) with
    {
        Verdict = new("diverging", "Diverging", " in its first step: the residual has grown 2,381-fold since iteration 1. The relaxation of 0.30 is above 0.197, the most this leaf tolerates.", Severity.Critical, 0),
        Step = 0,
        Iteration = 12,
        Passes = HandStrip.Exploding(13),
        Strip = [],
        AllocationEndsAt = now.AddHours(36),
        Forecast = new() { Text = "No end can be foretold: no step has converged. Left alone, the run keeps its nodes until the allocation ends, Thu 02:30." },
        Next = Advice("stop", "stop it, then restart with iqn-ils or a relaxation of 0.18 or less", adjustable: false),
        NodeHoursAtStake = 144,
        NodeHoursLeft = 144,
        OpenAlerts = [HandAlerts.Divergence(now)],
    };

    public static RunSummary Silent(DateTimeOffset now) => Lane("leaf80-5", "leaf 80 mm, case 5", now, 2) with
    {
        State = "quiet",
        LastRecordAt = now.AddMinutes(-47),
        Verdict = new("silent", "Silent for 47 min", ": the last word was step 10, iteration 0. A pass of this run takes 2.6 min; nothing is known of it since 13:45.", Severity.Warning, 10),
        Step = 10,
        Iteration = 0,
        StepsComplete = 10,
        Passes = HandStrip.Passes(4.8),
        Strip = HandStrip.Of(now.AddMinutes(-50), [12, 4, 4, 4, 4, 4, 4, 4, 4, 4]),
        AllocationEndsAt = now.AddHours(16),
        Forecast = new() { Text = "The forecast stands still. At 13:45 it was Wed 03:10 (02:20–04:30), 3.3 h before the allocation." },
        Next = Advice("beats", "look at the machine: job 48117, last heard inside neither solver. Send beat records to learn which"),
        NodeHoursAtStake = 32,
        NodeHoursLeft = 32,
        OpenAlerts = [HandAlerts.Silence(now)],
    };

    public static RunSummary Losing(DateTimeOffset now) => Lane("leaf80-3", "leaf 80 mm, case 3", now, 2) with
    {
        Verdict = new("losing-time", "Losing time", ": 8.0 iterations a step over the last ten, and step 16 stands at 20. The basis is starved: 44 of its 49 columns are left out, the newest first.", Severity.Warning, 3),
        Step = 16,
        Iteration = 19,
        StepsComplete = 16,
        IterationsPerStep = 8.0,
        IterationsPerStepOverall = 10.1,
        CappedSteps = 1,
        Passes = HandStrip.Passes(4.6, 4.2, 3.9, 3.7, 3.6, 3.5, 3.4, 3.3, 3.2, 3.1, 3.0, 2.9, 2.8, 2.7, 2.6, 2.5, 2.4, 2.3, 2.2, 2.1),
        Strip = HandStrip.Of(now.AddMinutes(-5), [40, 19, 22, 10, 12, 7, 8, 6, 9, 10, 6, 7, 6, 16, 6, 6], minutes: 70),
        AllocationEndsAt = now.AddHours(30),
        Forecast = Ends(now, 33, 26, 48.4, "Ends Wed 23:15 (16:30 – Thu 15:00), after the allocation has ended at 20:30: about 8 of 103 steps will not fit.", 0.7, 8),
        Next = Advice("threshold", "lower the threshold from 10⁻² to 10⁻⁷ (ten times the declared noise)", adjustable: true),
        NodeHoursAtStake = 31,
        NodeHoursLeft = 65,
        OpenAlerts = [HandAlerts.Starved(now), HandAlerts.SlowBecauseStarved(now)],
    };

    public static RunSummary Dearer(DateTimeOffset now) => Lane("plate-7", "cold plate, ratio 17", now, 1, "coolant", "plate", "cold-plate") with
    {
        Verdict = new("dearer", "On course, dearer than need be", ": a steady 13.0 iterations a step by relaxation alone. Sister plate-3, with iqn-ils and a history of 12, needs 5.4.", Severity.Note),
        Step = 11,
        Iteration = 6,
        StepsComplete = 11,
        IterationsPerStep = 13.0,
        Passes = HandStrip.Passes(3.9, 3.4, 2.9, 2.4, 1.9, 1.5, 1.1),
        Strip = HandStrip.Of(now.AddMinutes(-5), [14, 14, 13, 13, 13, 13, 13, 13, 13, 13, 13], minutes: 40),
        AllocationEndsAt = now.AddHours(41),
        Forecast = Ends(now, 27.4, 26.8, 28.2, "Ends Wed 17:55 (17:20–18:40), 13.6 h before the allocation.", 0),
        Next = Advice("method", "try iqn-ils with a history of 8; at 5 iterations a step it would end 17 h earlier", adjustable: false),
        NodeHoursAtStake = 17,
        NodeHoursLeft = 27,
        OpenAlerts = [HandAlerts.Unequal(now)],
    };

    public static RunSummary GaveUp(DateTimeOffset now) => Lane("leaf60-4", "leaf 60 mm, hard seal", now, 2) with
    {
        Verdict = new("gave-up", "Gave up", ": steps 30 and 31 ended at the cap of 40 with the residual 12 times its target; the run goes on from them.", Severity.Critical, 30),
        Step = 32,
        Iteration = 4,
        StepsComplete = 32,
        IterationsPerStep = 11.4,
        CappedSteps = 2,
        Passes = HandStrip.Passes(4.4, 4.1, 3.9, 3.8, 3.7),
        Strip = HandStrip.Of(now.AddMinutes(-9), [.. HandStrip.Counts(30, 12, 4, 1, 5), 40, 40], minutes: 25),
        AllocationEndsAt = now.AddHours(44),
        Forecast = Ends(now, 12, 10.5, 14, "Ends Wed 02:30 (01:00–04:30), 32 h before the allocation.", 0),
        Next = Advice("timeStep", "halve the time step while the seal is in contact", adjustable: false),
        NodeHoursAtStake = 9,
        NodeHoursLeft = 24,
        OpenAlerts = [HandAlerts.Unconverged(now)],
    };

    public static RunSummary Restarted(DateTimeOffset now) => Lane("seal-2", "leaf 80 mm, soft seal", now, 2) with
    {
        Verdict = new("on-course", "On course", ": 4.4 iterations a step. The seal touched from step 13 to 24 and cost up to 7; it has let go again."),
        Step = 40,
        Iteration = 2,
        StepsComplete = 40,
        IterationsPerStep = 4.4,
        Passes = HandStrip.Passes(3.6, 2.0, 0.7),
        Strip = Redone(now),
        AllocationEndsAt = now.AddHours(44),
        Forecast = Ends(now, 40, 36.8, 46, "Ends Thu 06:40 (03:20–12:30); 1 chance in 5 that it misses the allocation, Thu 10:30.", 0.2),
        NodeHoursAtStake = 4,
        NodeHoursLeft = 80,
    };

    public static RunSummary Long(DateTimeOffset now) => Lane("basin-year", "harbour basin, one year", now, 8, "waves", "moorings", "moorings") with
    {
        Level = 1,
        Verdict = new("on-course", "On course", ": 2.8 iterations a step over 100,000 steps. 41 gave up, all between 60,000 and 60,400; the run went on from them and the record lists each."),
        Step = 100_000,
        Iteration = 1,
        StepsComplete = 100_000,
        IterationsPerStep = 2.8,
        CappedSteps = 41,
        Passes = HandStrip.Passes(2.2, 0.9),
        Strip = HandStrip.Groups(now, 250, 400, 2.2),
        AllocationEndsAt = now.AddHours(20),
        Forecast = Ends(now, 11.1, 10.6, 11.8, "Ends Wed 01:40 (01:10–02:20), 8.8 h before the allocation.", 0),
        NodeHoursAtStake = 2,
        NodeHoursLeft = 89,
    };

    public static RunSummary NotJudged(DateTimeOffset now) => Lane("gate-wall-1", "leaf with warm wall", now, 2, "water", "rest") with
    {
        Verdict = new("not-judged", "On course by its norms; the basis is not judged", ": two fields of different units came without weights. Send fields[].weight."),
        Step = 20,
        Iteration = 2,
        StepsComplete = 20,
        IterationsPerStep = 4.0,
        Passes = HandStrip.Passes(3.2, 1.4, 0.4),
        Strip = HandStrip.Of(now.AddMinutes(-4), HandStrip.Counts(20, 12, 4, 0, 7)),
        AllocationEndsAt = now.AddHours(41.5),
        Forecast = Ends(now, 25.6, 25, 26.8, "Ends Wed 16:10 (15:30–17:20), 15.8 h before the allocation.", 0),
        NodeHoursAtStake = 1,
        NodeHoursLeft = 51,
    };

    public static RunSummary Learning(DateTimeOffset now) => Lane("leaf80-9", "leaf 80 mm, case 9", now, 2) with
    {
        Verdict = new("learning", "Learning, 6 of 15 steps", ": no step has been unusual so far. Divergence is watched from the start; the rest from step 15."),
        Step = 6,
        Iteration = 1,
        StepsComplete = 6,
        IterationsPerStep = 5.3,
        Passes = HandStrip.Passes(5.9, 3.4),
        Strip = HandStrip.Of(now.AddMinutes(-4), [12, 4, 4, 4, 4, 4]),
        AllocationEndsAt = now.AddHours(44),
        Forecast = Ends(now, 35.5, 27, 47, "Ends Thu 02:00 (Wed 18:00 – Thu 16:00), from the rate of 6 steps alone.", 0.2),
    };

    public static RunSummary Finished(DateTimeOffset now) => Lane("leaf80-1", "leaf 80 mm, case 1", now, 2) with
    {
        State = "finished",
        LastRecordAt = now.AddHours(-11.3),
        Verdict = new("finished", "Finished", ": 45 of 45 steps met their target, 3.7 iterations a step."),
        Step = 44,
        Iteration = 3,
        StepsComplete = 45,
        IterationsPerStep = 3.7,
        Strip = HandStrip.Of(now.AddHours(-11.3), HandStrip.Counts(45, 12, 3, 1, 9)),
        AllocationEndsAt = now.AddHours(-6.5),
        Forecast = new() { Text = "Ended Tue 03:12, 4.8 h before its allocation. 15.6 node-h." },
        NodeHoursAtStake = 0,
        NodeHoursLeft = 0,
    };

    private static RunSummary Lane(string run, string title, DateTimeOffset now, double nodes, string left = "water", string right = "leaf", string campaign = "north-lock") => new()
    {
        Run = run,
        Title = title,
        Campaign = campaign,
        State = "live",
        Level = 3,
        Solvers = [left, right],
        Nodes = nodes,
        Verdict = new("on-course", "On course", ""),
        LastRecordAt = now.AddSeconds(-2),
        NextSeq = 100,
    };

    private static RunForecast Ends(DateTimeOffset now, double hours, double early, double late, string text, double chance, double? notFitting = null) => new()
    {
        Ends = now.AddHours(hours),
        EndsEarly = now.AddHours(early),
        EndsLate = now.AddHours(late),
        ChanceToMiss = chance,
        StepsThatDoNotFit = notFitting,
        Text = text,
    };

    private static Advice Advice(string setting, string text, bool adjustable = true) => new()
    {
        Id = "a-" + setting,
        Setting = setting,
        Text = text,
        Adjustable = adjustable,
        Expected = new JsonObject(),
    };

    private static IReadOnlyList<StripBar> Redone(DateTimeOffset now) =>
        [.. HandStrip.Of(now.AddMinutes(-6), HandStrip.Counts(40, 6, 4, 2, 11), minutes: 30).Select(b => b.FromStep is >= 20 and < 24 ? b with { Redone = 1 } : b.FromStep == 12 ? b with { Revision = 1 } : b)];
}
