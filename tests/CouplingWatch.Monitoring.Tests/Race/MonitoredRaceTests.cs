using System.Text.Json;
using CouplingWatch.Monitoring.Race;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Race;

/// <summary>The race inside the monitor of a run: records and events in, wishes out, and what a challenger's steps may not touch.</summary>
public sealed class MonitoredRaceTests
{
    private static int Better(CouplingSettings s) => s.HistorySteps == 8 ? 5 : 9;

    [Fact]
    public void A_race_runs_from_records_and_events_to_a_published_winner()
    {
        var run = new MadeUpRun(Better);
        run.Steps(14);
        run.StartRace(new CouplingSettings { HistorySteps = 8 });
        run.Steps(80);
        var race = run.Monitor.Race!;
        Assert.Equal((RaceState.Finished, "publish", 1, "held"), (race.State, race.Verdict!.Code, race.Verdict.Winner, race.Verdict.Watch));
        Assert.Equal(8, run.InForce.HistorySteps);
        Assert.Equal("race-1", run.Monitor.Detail().Race!.Id);
        Assert.All(run.Monitor.Revisions.Skip(1), r => Assert.Equal("race-1", r.By));
        Assert.True(race.Cost.Seconds < 0);
    }

    [Fact]
    public void Steps_under_a_challenger_start_no_hold_off_and_enter_no_count()
    {
        var run = new MadeUpRun(s => s.HistorySteps == 8 ? 12 : 9);
        run.Steps(20);
        run.StartRace(new CouplingSettings { HistorySteps = 8 }, new CouplingSettings { HistorySteps = 12 });
        var onTrial = 0;
        for (var i = 0; i < 20; i++)
        {
            run.Steps(1);
            if (run.InForce.HistorySteps == 8) onTrial++;
            Assert.False(run.Monitor.State.Learning.Holds);
            Assert.All(Enumerable.Range(0, run.Monitor.State.Counts.Count), at => Assert.Equal(9, run.Monitor.State.Counts[at]));
        }
        Assert.True(onTrial >= 4);
    }

    [Fact]
    public void What_a_challenger_raises_stands_in_the_log_of_the_race_and_is_no_alert()
    {
        var run = new MadeUpRun(s => s.HistorySteps == 8 ? 40 : 9);
        run.Steps(14);
        run.StartRace(new CouplingSettings { HistorySteps = 8 });
        run.Steps(12);
        Assert.Empty(run.Monitor.Alerts);
        var race = run.Monitor.Race!;
        Assert.Equal(1, race.Cost.CappedSteps);
        Assert.Contains(race.Log, e => e.What == "out" && e.Arm == 1);
        Assert.Contains(race.Log, e => e.What == "raised" && e.Arm == 1);
        Assert.Equal(4, run.InForce.HistorySteps);
    }

    [Fact]
    public void A_residual_that_is_no_number_is_an_alert_under_a_challenger_too()
    {
        var run = new MadeUpRun(s => 9) { NotANumberUnder = 8 };
        run.Steps(14);
        run.StartRace(new CouplingSettings { HistorySteps = 8 });
        run.Steps(12);
        Assert.Contains(run.Monitor.Alerts, a => a.Check == "divergence");
        Assert.Equal("out", run.Monitor.Race!.Arms[1].State);
    }

    [Fact]
    public void The_winner_is_learnt_anew()
    {
        var run = new MadeUpRun(Better);
        run.Steps(14);
        run.StartRace(new CouplingSettings { HistorySteps = 8 });
        var guard = 0;
        while (run.Monitor.Race!.State == RaceState.Running && guard++ < 100) run.Steps(1);
        run.Steps(1);
        Assert.Equal(RaceState.Watching, run.Monitor.Race!.State);
        Assert.True(run.Monitor.State.Learning.Holds);
        run.Steps(6);
        Assert.All(Enumerable.Range(0, run.Monitor.State.Counts.Count), at => Assert.Equal(5, run.Monitor.State.Counts[at]));
    }

    /// <summary>A server that dies at any moment and replays its journal goes on with the same race, the wish included.</summary>
    [Theory]
    [InlineData(0)]
    [InlineData(2)]
    public void A_restart_in_the_middle_changes_nothing(int pickUpDelay)
    {
        var whole = new MadeUpRun(Better) { Delay = pickUpDelay };
        whole.Steps(14);
        whole.StartRace(new CouplingSettings { HistorySteps = 8 }, new CouplingSettings { HistorySteps = 2 });
        for (var i = 0; i < 95; i++)
        {
            whole.Steps(1, restart: true);
            var again = whole.Replayed();
            Assert.Equal(JsonSerializer.Serialize(whole.Monitor.Race, WireJson.Options), JsonSerializer.Serialize(again.Race, WireJson.Options));
            Assert.Equal(whole.Monitor.RaceWish?.Arm, again.RaceWish?.Arm);
        }
        Assert.Equal(8, whole.InForce.HistorySteps);
    }

    [Fact]
    public void It_is_prepared_only_where_it_can_run_and_says_why_not()
    {
        var run = new MadeUpRun(Better);
        Assert.Equal("no-open", new RunMonitor("x").PrepareRace(new RaceProposal(), "day shift", 1, default).Code);
        run.Steps(3);
        Assert.Equal("no-challenger", run.Monitor.PrepareRace(new RaceProposal { Challengers = [new() { Relaxation = 0.5 }] }, "day shift", 1, default).Code);
        var auto = run.Monitor.PrepareRace(new RaceProposal { Seed = 7 }, "day shift", 1, default);
        Assert.Equal(7, auto.Event!.Seed);
        Assert.All(auto.Event.Challengers, c => Assert.Equal("rule", c.Origin));
        run.StartRace(new CouplingSettings { HistorySteps = 8 });
        Assert.Equal("race-running", run.Monitor.PrepareRace(new RaceProposal(), "day shift", 1, default).Code);
        Assert.Equal((RaceState.Waiting, 9), (run.Monitor.Race!.State, run.Monitor.Race.StepsMissing));
    }

    [Fact]
    public void A_race_ends_with_the_run_and_a_second_one_gets_the_next_number()
    {
        var run = new MadeUpRun(Better);
        run.Steps(14);
        run.StartRace(new CouplingSettings { HistorySteps = 8 });
        run.Steps(5);
        run.Observe(new RaceStoppedEvent("race-1", "day shift", null) { At = default });
        run.Steps(14);
        Assert.Equal(4, run.InForce.HistorySteps);
        run.StartRace(new CouplingSettings { HistorySteps = 8 });
        Assert.Equal(["race-1", "race-2"], run.Monitor.Races.Select(r => r.Id));
        run.Steps(2);
        run.Send(new CloseRecord { Outcome = CloseOutcome.Finished });
        Assert.Equal(RaceState.Stopped, run.Monitor.Race!.State);
        Assert.Null(run.Monitor.RaceWish);
    }
}
