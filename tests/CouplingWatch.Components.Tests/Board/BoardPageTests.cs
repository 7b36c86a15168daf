using Bunit;
using CouplingWatch.Components.Board;
using CouplingWatch.Components.Layout;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;
using Microsoft.Extensions.DependencyInjection;

namespace CouplingWatch.Components.Tests.Board;

public sealed class BoardPageTests : PageTest
{
    private static readonly DateTimeOffset Now = HandLock.Now;

    [Fact]
    public void Each_run_is_a_lane_labelled_by_its_verdict()
    {
        var page = Render<BoardPage>();
        var lanes = page.FindAll("article.lane");
        Assert.Equal(10, lanes.Count);
        foreach (var lane in lanes) Assert.NotNull(page.Find($"#{lane.GetAttribute("aria-labelledby")}"));
        Assert.StartsWith("Diverging in its first step", page.Find("#lane-leaf95-1").TextContent, StringComparison.Ordinal);
        Assert.Equal("Which run needs me?", page.Find("h1").TextContent);
    }

    [Fact]
    public void A_lane_that_asks_is_large_and_the_others_are_calm()
    {
        var page = Render<BoardPage>();
        Assert.Equal(5, page.FindAll("article.lane.calm").Count);
        Assert.Empty(page.FindAll("article.calm .is-bad, article.calm .is-slow, article.calm .is-quiet"));
    }

    [Fact]
    public void A_silent_run_is_never_shown_as_running()
    {
        Feed.Runs.RemoveAll(r => r.Run != "leaf80-5");
        var page = Render<BoardPage>();
        Assert.Single(page.FindAll(".seam-silent"));
        Assert.Single(page.FindAll(".fc .none"));
        Assert.Contains("Silent for 47 min", page.Markup, StringComparison.Ordinal);
        Assert.DoesNotContain("Ends ", page.Find(".end").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void A_learning_run_promises_nothing_yet()
    {
        Feed.Runs.RemoveAll(r => r.Run != "leaf80-9");
        var page = Render<BoardPage>();
        Assert.Single(page.FindAll(".seam-learning"));
        Assert.Contains("Next: nothing yet.", page.Find(".next").TextContent, StringComparison.Ordinal);
        Assert.Equal("At stake: not known yet.", page.Find(".stake").TextContent);
    }

    [Fact]
    public void What_is_not_judged_says_what_to_send()
    {
        Feed.Runs.RemoveAll(r => r.Run != "gate-wall-1");
        var page = Render<BoardPage>();
        Assert.Single(page.FindAll(".seam-dotted"));
        Assert.Contains("Send fields[].weight.", page.Find(".say").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void A_closed_run_has_no_step_in_progress()
    {
        Feed.Runs.RemoveAll(r => r.Run != "leaf80-1");
        var page = Render<BoardPage>();
        Assert.Single(page.FindAll(".seam-one"));
        Assert.Empty(page.FindAll(".pairs .rail"));
        Assert.Equal("closed 03:14", page.Find(".strip .now .axis").TextContent);
    }

    [Fact]
    public void The_empty_board_says_what_to_send_and_becomes_the_board()
    {
        Feed.Runs.Clear();
        var page = Render<BoardPage>();
        Assert.Equal("No run has sent anything yet.", page.Find("h1").TextContent);
        Assert.Contains("http://localhost/api/runs/first/records", page.Find("#first-lines").TextContent, StringComparison.Ordinal);
        Assert.NotNull(page.Find("[data-copy=first-lines]"));
        Feed.Set(HandLock.Learning(Now));
        Feed.Tell("leaf80-9");
        Clock.Advance(TimeSpan.FromSeconds(1));
        page.WaitForAssertion(() => Assert.Single(page.FindAll("article.lane")));
    }

    [Fact]
    public void New_records_draw_their_lane_again_and_no_other()
    {
        var page = Render<BoardPage>();
        Feed.Set(HandLock.Dearer(Now) with { Title = "would show if the lane were drawn again" });
        Feed.Set(HandLock.Losing(Now) with { Iteration = 20, NextSeq = 101 });
        Feed.Tell("leaf80-3");
        Clock.Advance(LiveUpdates.Interval);
        page.WaitForAssertion(() => Assert.Contains("step 16, iteration 20", page.Markup, StringComparison.Ordinal));
        Assert.DoesNotContain("would show if", page.Markup, StringComparison.Ordinal);
    }

    [Fact]
    public void The_order_changes_only_when_asked()
    {
        var page = Render<BoardPage>();
        Assert.Empty(page.FindAll("#put-in-order"));
        Feed.Set(HandLock.Long(Now) with { NodeHoursAtStake = 89, NextSeq = 200 });
        Feed.Tell("basin-year");
        Clock.Advance(LiveUpdates.Interval);
        page.WaitForAssertion(() => Assert.Contains("The order has changed.", page.Find(".board-facts [role=status]").TextContent, StringComparison.Ordinal));
        Assert.Equal("lane-leaf80-5", page.FindAll("article")[1].GetAttribute("aria-labelledby"));
        page.Find("#put-in-order").Click();
        Assert.Equal("lane-basin-year", page.FindAll("article")[1].GetAttribute("aria-labelledby"));
        Assert.Empty(page.FindAll("#put-in-order"));
    }

    [Fact]
    public void A_changed_verdict_is_announced_and_iterations_are_not()
    {
        var page = Render<BoardPage>();
        Feed.Set(HandLock.Losing(Now) with { Iteration = 20, NextSeq = 101 });
        Feed.Tell("leaf80-3");
        Clock.Advance(LiveUpdates.Interval);
        page.WaitForAssertion(() => Assert.Contains("iteration 20", page.Markup, StringComparison.Ordinal));
        Assert.Equal("", page.Find("p.unseen[role=status]").TextContent);
        Feed.Set(HandLock.Losing(Now) with { Verdict = new("on-course", "On course", ": 4.0 iterations a step."), NextSeq = 102 });
        Feed.Tell("leaf80-3");
        Clock.Advance(LiveUpdates.Interval);
        page.WaitForAssertion(() => Assert.Equal("leaf80-3: On course.", page.Find("p.unseen[role=status]").TextContent));
    }

    [Fact]
    public void The_clock_moves_on_although_no_record_comes()
    {
        var page = Render<BoardPage>();
        Assert.Contains("14:32 UTC", page.Find("time").TextContent, StringComparison.Ordinal);
        Clock.Advance(TimeSpan.FromMinutes(3));
        page.WaitForAssertion(() => Assert.Contains("14:35 UTC", page.Find("time").TextContent, StringComparison.Ordinal));
    }

    [Fact]
    public async Task What_changed_since_the_last_look_is_told_with_links()
    {
        var module = JSInterop.SetupModule("./js/viewer.js");
        module.Setup<Viewer.Told?>("begin", _ => true).SetResult(new Viewer.Told("UTC", Now.AddHours(-20).ToString("o"), false));
        var page = Render<BoardPage>();
        await Services.GetRequiredService<Viewer>().LearnAsync(JSInterop.JSRuntime);
        page.WaitForAssertion(() => Assert.Contains("leaf95-1 began to diverge at 14:14", page.Find(".since p").TextContent, StringComparison.Ordinal));
        Assert.Equal("runs/leaf95-1", page.Find(".since p a").GetAttribute("href"));
        Assert.Contains("Mon 30 Nov, 18:32", page.Find(".since h2").TextContent, StringComparison.Ordinal);
        Assert.NotEmpty(page.FindAll(".looked"));
    }

    [Fact]
    public async Task A_first_visit_says_that_there_is_nothing_to_compare_with()
    {
        var module = JSInterop.SetupModule("./js/viewer.js");
        module.Setup<Viewer.Told?>("begin", _ => true).SetResult(new Viewer.Told("Nowhere/Atlantis", null, false));
        var page = Render<BoardPage>();
        await Services.GetRequiredService<Viewer>().LearnAsync(JSInterop.JSRuntime);
        page.WaitForAssertion(() => Assert.Equal("This browser has not shown the board before.", page.Find(".since p").TextContent));
    }

    [Fact]
    public void The_page_needs_no_inline_style() => Assert.DoesNotContain("style=", Render<BoardPage>().Markup, StringComparison.Ordinal);

    [Fact]
    public async Task A_board_that_is_left_stops_listening()
    {
        _ = Render<BoardPage>();
        await DisposeComponentsAsync();
        Assert.Equal(0, Feed.Listeners);
    }
}
