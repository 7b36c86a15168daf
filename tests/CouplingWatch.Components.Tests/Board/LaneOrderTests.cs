using CouplingWatch.Components.Board;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Board;

public sealed class LaneOrderTests
{
    private static readonly DateTimeOffset Now = HandLock.Now;

    [Fact]
    public void Most_at_stake_comes_first_whatever_the_names()
    {
        var order = LaneOrder.ByStake(HandLock.Lanes(Now).Reverse());
        Assert.Equal(["leaf95-1", "leaf80-5", "leaf80-3", "plate-7", "leaf60-4", "seal-2", "basin-year", "gate-wall-1", "leaf80-9", "leaf80-1"], order.Select(r => r.Run));
    }

    [Fact]
    public void Where_the_stake_is_unknown_the_severity_stands_for_it()
    {
        var critical = HandLock.Diverging(Now) with { Run = "z", NodeHoursAtStake = null };
        var warning = HandLock.Losing(Now) with { Run = "y", NodeHoursAtStake = null };
        var order = LaneOrder.ByStake([warning, HandLock.Dearer(Now), HandLock.NotJudged(Now) with { NodeHoursAtStake = 0.4 }, critical]);
        Assert.Equal(["z", "plate-7", "y", "gate-wall-1"], order.Select(r => r.Run));
    }

    [Fact]
    public void A_live_page_moves_no_lane_until_asked()
    {
        var order = new LaneOrder();
        var (a, b) = (HandLock.Losing(Now), HandLock.Restarted(Now));
        order.Settle([a, b]);
        var worse = b with { NodeHoursAtStake = 70 };
        Assert.True(order.IsStale([a, worse]));
        Assert.Equal([a.Run, b.Run], order.Apply([worse, a]).Select(r => r.Run));
        order.Settle([a, worse]);
        Assert.False(order.IsStale([a, worse]));
        Assert.Equal([b.Run, a.Run], order.Apply([a, worse]).Select(r => r.Run));
    }

    [Fact]
    public void A_run_that_appears_stands_at_the_end_until_asked()
    {
        var order = new LaneOrder();
        order.Settle([HandLock.Restarted(Now)]);
        RunSummary[] both = [HandLock.Diverging(Now), HandLock.Restarted(Now)];
        Assert.Equal(["seal-2", "leaf95-1"], order.Apply(both).Select(r => r.Run));
        Assert.True(order.IsStale(both));
    }

    [Fact]
    public void The_height_of_a_lane_is_settled_with_the_order()
    {
        var order = new LaneOrder();
        var run = HandLock.Restarted(Now);
        order.Settle([run]);
        Assert.True(order.IsCalm(run.Run));
        var slow = run with { Verdict = HandLock.Losing(Now).Verdict };
        Assert.True(order.IsStale([slow]));
        Assert.True(order.IsCalm(run.Run));
        order.Settle([slow]);
        Assert.False(order.IsCalm(run.Run));
    }

    [Fact]
    public void Hundredths_of_a_node_hour_do_not_call_for_a_new_order()
    {
        var order = new LaneOrder();
        var (a, b) = (HandLock.Restarted(Now) with { NodeHoursAtStake = 4.02 }, HandLock.Long(Now) with { NodeHoursAtStake = 4.01 });
        order.Settle([a, b]);
        Assert.False(order.IsStale([a with { NodeHoursAtStake = 4.01 }, b with { NodeHoursAtStake = 4.03 }]));
        Assert.Equal(["basin-year", "seal-2"], order.Apply([a, b]).Select(r => r.Run));
        Assert.True(order.IsStale([a with { NodeHoursAtStake = 5 }, b]));
    }

    [Fact]
    public void Closed_runs_stand_last_the_newest_first()
    {
        var old = HandLock.Finished(Now) with { Run = "a-old", LastRecordAt = Now.AddDays(-3) };
        Assert.Equal(["leaf80-9", "leaf80-1", "a-old"], LaneOrder.ByStake([old, HandLock.Finished(Now), HandLock.Learning(Now)]).Select(r => r.Run));
    }
}
