using CouplingWatch.Components.Board;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Board;

public sealed class LaneWordsTests
{
    private static readonly DateTimeOffset Now = HandLock.Now;

    [Fact]
    public void An_end_before_the_allocation_says_how_long_before() =>
        Assert.Equal(("Ends Wed 17:55", " (17:20–18:43), 13.6 h before the allocation."), LaneWords.End(HandLock.Dearer(Now), Now));

    [Fact]
    public void An_end_after_the_allocation_says_what_will_not_fit() =>
        Assert.Equal(("Ends Wed 23:32", " (16:32 – Thu 14:55), after the allocation has ended at Wed 20:32: about 8 of 103 steps will not fit."),
            LaneWords.End(HandLock.Losing(Now) with { StepsPlanned = 103 }, Now));

    [Fact]
    public void A_chance_to_miss_is_said_in_whole_numbers() =>
        Assert.Equal("; 1 chance in 5 that it misses the allocation, Thu 10:32.", LaneWords.End(HandLock.Restarted(Now), Now).Tail[" (03:20–12:32)".Length..]);

    [Fact]
    public void A_silent_or_closed_run_keeps_its_own_sentence()
    {
        Assert.Equal("The forecast stands still.", LaneWords.End(HandLock.Silent(Now), Now).Lead);
        Assert.Equal("Ended Tue 03:12", LaneWords.End(HandLock.Finished(Now), Now).Lead);
        Assert.Equal(("No end can be foretold", ": no step has converged. Left alone, the run keeps its nodes until the allocation ends, Thu 02:30."), LaneWords.End(HandLock.Diverging(Now), Now));
        Assert.Equal(("No end can be foretold yet", "."), LaneWords.End(HandLock.Learning(Now) with { Forecast = null }, Now));
    }

    [Fact]
    public void The_stake_is_a_number_or_a_reason()
    {
        Assert.Equal("At stake: 31 of 65 node-h.", LaneWords.Stake(HandLock.Losing(Now)));
        Assert.Equal("At stake: not known yet.", LaneWords.Stake(HandLock.Learning(Now)));
        Assert.Equal("At stake: not known; the run does not say how many nodes it holds.", LaneWords.Stake(HandLock.Learning(Now) with { Nodes = null }));
        Assert.Equal("At stake: nothing.", LaneWords.Stake(HandLock.Finished(Now)));
        Assert.Equal("At stake: 0 of 30 node-h.", LaneWords.Stake(HandLock.Losing(Now) with { NodeHoursAtStake = 0, NodeHoursLeft = 30 }));
    }

    [Fact]
    public void The_place_of_a_run_is_its_step_and_iteration()
    {
        Assert.Equal("step 100,000, iteration 1", LaneWords.Place(HandLock.Long(Now), Now));
        Assert.Equal("closed 03:14", LaneWords.Place(HandLock.Finished(Now), Now));
        Assert.Equal("no iteration yet", LaneWords.Place(HandLock.Learning(Now) with { Step = -1, Iteration = -1 }, Now));
    }

    [Theory]
    [InlineData("Ended Tue 03:12, 4.8 h before its allocation.", "Ended Tue 03:12")]
    [InlineData("No step yet", "No step yet")]
    [InlineData("Nothing known.", "Nothing known")]
    [InlineData("It ends (so it seems) soon.", "It ends")]
    [InlineData("", "")]
    public void A_sentence_is_split_where_its_first_clause_ends(string text, string lead)
    {
        var (first, tail) = LaneWords.Split(text);
        Assert.Equal(lead, first);
        Assert.Equal(text, first + tail);
    }
}
