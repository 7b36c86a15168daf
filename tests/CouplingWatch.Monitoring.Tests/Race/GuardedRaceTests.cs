using CouplingWatch.Monitoring.Race;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Race;

public sealed class GuardedRaceTests
{
    private static int Better(int step, CouplingSettings s) => s.HistorySteps == 5 ? 6 : 10;

    [Fact]
    public void It_waits_for_twelve_complete_steps()
    {
        var track = new RaceTrack((_, _) => 10, before: 7);
        Assert.Equal((RaceState.Waiting, 5), (track.Race.State, track.Race.View().StepsMissing));
        for (var i = 0; i < 5; i++)
        {
            Assert.Null(track.Race.Wish);
            track.OneStep();
        }
        Assert.Equal(RaceState.Running, track.Race.State);
    }

    [Fact]
    public void The_guard_stands_on_the_ninetieth_percentile_without_the_first_three_steps()
    {
        // The window's first three steps (20 iterations each) do not count: of 4 4 4 4 4 4 4 4 9 the 90 % quantile is 5.
        var track = new RaceTrack((s, _) => s < 3 ? 20 : s == 11 ? 9 : 4, challengers: 1);
        var guard = track.Race.View().Guard!;
        Assert.Equal(5, guard.Before90, 9);
        Assert.Equal((8, false), (Math.Round(guard.Limit, 9), guard.AtCap));
        Assert.Equal(30, new RaceTrack((_, _) => 20, challengers: 1).Race.View().Guard!.Limit);
    }

    [Fact]
    public void Every_block_discards_one_step_and_scores_three()
    {
        // The first step after a change takes longer; it must not be scored.
        CouplingSettings? last = null;
        var track = new RaceTrack((_, s) =>
        {
            var extra = last is not null && !ReferenceEquals(last, s) ? 3 : 0;
            last = s;
            return Better(0, s) + extra;
        });
        var view = track.RunToTheEnd();
        Assert.All(view.Rounds.SelectMany(r => r.Scores), b => Assert.Equal(b.Arm == 1 ? 6 : 10, b.Score));
        Assert.All(view.Rounds, r => Assert.Equal(r.Order.Order(), r.Scores.Select(b => b.Arm).Order()));
        Assert.All(view.Rounds.SelectMany(r => r.Scores), b => Assert.Equal(2, b.ToStep - b.FromStep));
    }

    [Fact]
    public void The_better_settings_win_are_published_and_hold()
    {
        var track = new RaceTrack(Better);
        var view = track.RunToTheEnd();
        Assert.Equal((RaceState.Finished, "publish", 1, "held"), (view.State, view.Verdict!.Code, view.Verdict.Winner, view.Verdict.Watch));
        Assert.Equal(5, track.InForce.HistorySteps);
        Assert.Equal((-4, -4, -4, 5), (view.Verdict.Effect!.Mean, view.Verdict.Effect.Low!.Value, view.Verdict.Effect.High!.Value, view.Verdict.Effect.Rounds));
        Assert.Equal("winner", view.Arms[1].State);
    }

    [Fact]
    public void A_gain_below_eight_per_cent_changes_nothing()
    {
        // 24 against 25 is 4 % less in every round.
        var view = new RaceTrack((_, s) => s.HistorySteps == 5 ? 24 : 25, challengers: 1).RunToTheEnd();
        Assert.Equal(("keep", (int?)null), (view.Verdict!.Code, view.Verdict.Winner));
        Assert.Contains("Nothing better was found", view.Verdict.Text, StringComparison.Ordinal);
    }

    [Fact]
    public void A_lower_mean_that_comes_from_few_rounds_does_not_win()
    {
        // Much lower in two rounds of five, a little higher in three: 40 % of the rounds.
        var rounds = new Dictionary<int, int>();
        RaceTrack? track = null;
        track = new RaceTrack((_, s) => s.HistorySteps == 5 ? track!.Race.View().Rounds.Count <= 2 ? 5 : 21 : 20, challengers: 1);
        var view = track.RunToTheEnd();
        Assert.Equal(5, view.Rounds.Count);
        Assert.True(view.Arms[1].Mean < 0.92 * view.Arms[0].Mean);
        Assert.Equal("keep", view.Verdict!.Code);
    }

    [Fact]
    public void A_capped_step_puts_a_challenger_out_and_publishes_arm_0_at_once()
    {
        var track = new RaceTrack((_, s) => s.HistorySteps == 5 ? 40 : 10, delay: 2);
        var view = track.RunToTheEnd();
        Assert.Equal("out", view.Arms[1].State);
        Assert.Contains("reached the cap", view.Arms[1].OutWhy, StringComparison.Ordinal);
        var at = track.Wishes.FindIndex(w => w.Arm == 1);
        Assert.Equal(0, track.Wishes[at + 1].Arm);
        // Its first step put it out; the two that still ran under it are cost.
        Assert.Equal(["cost", "cost", "cost"], view.Steps.Where(s => s.Arm == 1).Select(s => s.Use));
        Assert.DoesNotContain(view.Rounds.SelectMany(r => r.Scores), b => b.Arm == 1);
    }

    [Fact]
    public void A_step_longer_than_the_guard_allows_puts_a_challenger_out()
    {
        // p90 = 10: the limit is 15.
        Assert.Equal("in", new RaceTrack((_, s) => s.HistorySteps == 5 ? 15 : 10, challengers: 1, options: new RaceOptions { RoundsBeforeDropping = 9 }).RunToTheEnd().Arms[1].State);
        var view = new RaceTrack((_, s) => s.HistorySteps == 5 ? 16 : 10, challengers: 1).RunToTheEnd();
        Assert.Equal(("out", 1), (view.Arms[1].State, view.Arms[1].StepsRun));
        Assert.Contains("more than the guard's 15", view.Arms[1].OutWhy, StringComparison.Ordinal);
    }

    [Fact]
    public void Arm_0_itself_may_have_a_bad_step_without_ending_anything()
    {
        var view = new RaceTrack((s, settings) => settings.HistorySteps == 4 ? s % 9 == 8 ? 30 : 10 : 6, challengers: 1).RunToTheEnd();
        Assert.Equal("publish", view.Verdict!.Code);
    }

    [Fact]
    public void After_the_second_round_what_is_worse_leaves_and_of_the_rest_the_better_half_stays()
    {
        // Differences of the six: −1 −2 −3 −4 +1 +2.
        var view = new RaceTrack((_, s) => s.HistorySteps is int h and > 4 ? h <= 8 ? 20 - (h - 4) : 20 + (h - 8) : 20, challengers: 6).RunToTheEnd();
        Assert.Equal([7, 7, 3, 2, 2], view.Rounds.Select(r => r.Order.Count));
        Assert.Equal([0, 3, 4], view.Rounds[2].Order.Order());
        Assert.Equal([0, 4], view.Rounds[3].Order.Order());
        Assert.Equal(4, view.Verdict!.Winner);
        Assert.Contains("above the settings in use", view.Arms[5].OutWhy, StringComparison.Ordinal);
        Assert.Contains("not among the better half", view.Arms[1].OutWhy, StringComparison.Ordinal);
    }

    [Fact]
    public void Without_challengers_left_it_ends_early_and_arm_0_is_in_force()
    {
        var track = new RaceTrack((_, s) => s.HistorySteps == 4 ? 10 : 12, challengers: 3);
        var view = track.RunToTheEnd();
        Assert.Equal((2, "keep", 4), (view.Rounds.Count, view.Verdict!.Code, track.InForce.HistorySteps));
    }

    [Fact]
    public void Steps_belong_to_the_settings_the_run_says_are_in_force()
    {
        var view = new RaceTrack(Better, delay: 3).RunToTheEnd();
        Assert.All(view.Rounds.SelectMany(r => r.Scores), b => Assert.Equal(b.Arm == 1 ? 6 : 10, b.Score));
        Assert.Equal("publish", view.Verdict!.Code);
    }

    [Fact]
    public void Where_arm_0_is_at_the_cap_challengers_start_without_history_and_their_discarded_step_may_reach_it()
    {
        CouplingSettings? last = null;
        var track = new RaceTrack((_, s) =>
        {
            var first = !ReferenceEquals(last, s);
            last = s;
            return s.HistorySteps == 4 || first ? 40 : 8;
        }, challengers: 1);
        Assert.True(track.Race.View().Guard!.AtCap);
        var view = track.RunToTheEnd();
        Assert.Equal(("publish", 1), (view.Verdict!.Code, view.Verdict.Winner));
        Assert.All(track.Wishes, w => Assert.Equal(w.Arm == 0 ? [] : ["dropHistory"], w.Commands));
    }

    [Fact]
    public void A_run_that_no_settings_mend_is_told_so()
    {
        var view = new RaceTrack((_, _) => 40, challengers: 3).RunToTheEnd();
        Assert.Equal("nothing-compared", view.Verdict!.Code);
        Assert.All(view.Arms.Skip(1), a => Assert.Equal("out", a.State));
    }

    [Fact]
    public void It_falls_back_after_a_capped_step_of_the_winner()
    {
        RaceTrack? track = null;
        track = new RaceTrack((_, s) => s.HistorySteps == 5 ? track?.Race.State == RaceState.Watching && track.Race.View().Steps.Count(x => x.Use == "watched") == 4 ? 40 : 6 : 10, challengers: 1);
        var view = track.RunToTheEnd();
        Assert.Equal(("fell-back", "fell-back", (int?)null), (view.Verdict!.Code, view.Verdict.Watch, view.Verdict.Winner));
        Assert.Equal(4, track.InForce.HistorySteps);
    }

    [Fact]
    public void It_falls_back_when_the_winner_is_slower_than_arm_0_was_over_ten_steps()
    {
        RaceTrack? track = null;
        track = new RaceTrack((_, s) => s.HistorySteps == 5 ? track?.Race.State == RaceState.Watching ? 11 : 6 : 10, challengers: 1);
        var view = track.RunToTheEnd();
        Assert.Equal("fell-back", view.Verdict!.Code);
        Assert.Equal(4, track.InForce.HistorySteps);
    }

    [Fact]
    public void It_can_be_stopped_at_any_time_and_goes_back()
    {
        for (var steps = 0; steps < 30; steps++)
        {
            var track = new RaceTrack(Better);
            for (var i = 0; i < steps; i++) track.OneStep();
            track.Tell(race => race.Stop("day shift", "a rehearsal of the emergency closure"));
            for (var i = 0; i < 3; i++) track.OneStep();
            Assert.Equal(RaceState.Stopped, track.Race.State);
            Assert.Equal(4, track.InForce.HistorySteps);
            Assert.Null(track.Race.Wish);
        }
    }

    [Fact]
    public void A_refused_challenger_is_out_and_the_race_goes_on()
    {
        var track = new RaceTrack((_, s) => s.HistorySteps == 6 ? 6 : 10) { Refuses = s => s.HistorySteps == 5 ? "needs more memory" : null };
        var view = track.RunToTheEnd();
        Assert.Contains("needs more memory", view.Arms[1].OutWhy, StringComparison.Ordinal);
        Assert.Equal(2, view.Verdict!.Winner);
    }

    [Fact]
    public void Settings_applied_otherwise_than_published_put_the_challenger_out()
    {
        var track = new RaceTrack((_, _) => 10, challengers: 1);
        while (track.Race.Wish is not { Arm: 1 }) track.OneStep();
        track.Tell(race => race.Published(90, 1));
        track.Tell(race => race.Applied(90, RaceTrack.History(7)));
        Assert.Contains("applied historySteps 7 instead of 5", track.Race.View().Arms[1].OutWhy, StringComparison.Ordinal);
    }

    [Fact]
    public void A_revision_of_somebody_else_stops_it()
    {
        var track = new RaceTrack(Better);
        track.Tell(race => race.Observe(RaceTrack.Step(12, 9) with { Revision = 77 }));
        Assert.Equal((RaceState.Stopped, "stopped"), (track.Race.State, track.Race.View().Verdict!.Code));
    }

    [Fact]
    public void A_run_that_never_takes_settings_over_ends_the_race()
    {
        var view = new RaceTrack(Better, delay: 10_000).RunToTheEnd();
        Assert.Contains("took over no settings for 20 steps", view.Verdict!.Text, StringComparison.Ordinal);
    }

    [Fact]
    public void Scored_by_seconds_the_faster_settings_win_though_they_iterate_more()
    {
        var track = new RaceTrack((s, settings) => RaceTrack.Step(s, settings.HistorySteps == 5 ? 11 : 10, settings.HistorySteps == 5 ? 70 : 100), 0, 1, scoreBy: RaceScore.Seconds);
        var view = track.RunToTheEnd();
        Assert.Equal((1, -30), (view.Verdict!.Winner, view.Verdict.Effect!.Mean));
        Assert.True(view.Cost is { Iterations: > 0, Seconds: < 0 });
    }

    [Fact]
    public void Incomplete_and_rejected_steps_are_not_scored()
    {
        var track = new RaceTrack((s, settings) => RaceTrack.Step(s, s % 5 == 0 ? 1 : 10) with { Whole = s % 5 != 0 }, 0, 1, before: 15);
        Assert.All(track.RunToTheEnd().Rounds.SelectMany(r => r.Scores), b => Assert.Equal(10, b.Score));
    }

    [Fact]
    public void What_it_has_cost_is_counted_against_arm_0_and_savings_are_negative()
    {
        // Challenger 1 needs 6 instead of 10: every step under it saves four. Nothing else deviates.
        var view = new RaceTrack(Better, challengers: 1).RunToTheEnd();
        Assert.Equal(-4.0 * view.Steps.Count(s => s.Arm == 1 && s.Use != "watched"), view.Cost.Iterations);
    }
}
