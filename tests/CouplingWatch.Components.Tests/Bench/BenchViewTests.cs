using Bunit;
using CouplingWatch.Components.Bench;
using CouplingWatch.Components.Feed;
using CouplingWatch.Components.Layout;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;
using Microsoft.Extensions.DependencyInjection;
using Microsoft.Extensions.Time.Testing;

namespace CouplingWatch.Components.Tests.Bench;

public class BenchViewTests : BunitContext
{
    private readonly HandFeed feed = HandLock.Feed();
    private readonly HandTrials trials = new();
    private readonly FakeTimeProvider clock = new(HandLock.Now);

    private IRenderedComponent<BenchView> Page(RunDetail? detail = null, bool offered = true)
    {
        JSInterop.Mode = JSRuntimeMode.Loose;
        Services.AddSingleton<IWatchFeed>(feed);
        if (offered) Services.AddSingleton<ITrialFeed>(trials);
        Services.AddSingleton<TimeProvider>(clock);
        Services.AddWatchComponents();
        SetRendererInfo(new RendererInfo("Server", true));
        var run = detail ?? HandDetails.Starved(HandLock.Now);
        feed.Details[run.Summary.Run] = run;
        feed.Basis = (_, _, _, rule, threshold) => HandDetails.Under(run.Basis!, rule ?? run.Basis!.Rule, threshold ?? run.Basis!.Threshold);
        return Render<BenchView>(p => p.Add(c => c.Run, run.Summary.Run));
    }

    private static AngleSharp.Dom.IElement Button(IRenderedComponent<BenchView> page, string text) => page.FindAll("button").First(b => b.TextContent.StartsWith(text, StringComparison.Ordinal));

    [Fact]
    public void A_dial_moves_the_line_of_the_ledger_and_the_answer_tells_what_would_be_left_out()
    {
        var page = Page();
        Assert.Equal("As it is, 40 of 45 columns are left out.", page.Find("#try .say").TextContent);
        page.Find("#dial-filterThreshold").Input("1e-7");
        Assert.Equal("1e-7", page.Find(".ledger-type input").GetAttribute("value"));
        Assert.Contains("now 40", page.Find("#try .say").TextContent, StringComparison.Ordinal);
        Assert.Contains("10⁻⁷", page.Find(".proposed").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void The_line_of_the_ledger_moves_the_dial_and_coming_back_takes_the_change_away()
    {
        var page = Page();
        page.Find(".ledger-slider").Input("-6");
        Assert.Equal("0.000001", page.Find("#dial-filterThreshold").GetAttribute("value")!.Replace("1e-6", "0.000001", StringComparison.Ordinal));
        Button(page, "Back to what is in force").Click();
        Assert.Equal("0.01", page.Find("#dial-filterThreshold").GetAttribute("value"));
        Assert.Contains("nothing changed yet", page.Find("#publish").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void A_slider_writes_its_field_and_a_field_moves_its_slider()
    {
        var page = Page();
        page.Find("input[aria-label='history, steps, slider']").Input("8");
        Assert.Equal("8", page.Find("#dial-historySteps").GetAttribute("value"));
        page.Find("#dial-relaxation").Input("0.25");
        Assert.Equal("0.25", page.Find("input[aria-label='relaxation, slider']").GetAttribute("value"));
    }

    [Fact]
    public void A_search_shows_the_calibration_first_then_the_candidates_best_first()
    {
        var page = Page();
        Button(page, "Search for better settings").Click();
        Assert.Null(Assert.Single(trials.Rehearsed));
        Assert.Contains("gives 11.0 iterations a step over 12 steps; 11.2 were recorded", page.Find(".calib").TextContent, StringComparison.Ordinal);
        Assert.Contains("trustworthy", page.Find(".calib").TextContent, StringComparison.Ordinal);
        Assert.Equal(6, page.FindAll(".cands tbody tr").Count);
        Assert.Contains("history 8 steps", page.Find(".cands tr.chosen").TextContent, StringComparison.Ordinal);
        Assert.Equal("History 8 steps: 4.5 iterations a step instead of 11.0.", page.Find("#rehearsal .say").TextContent);
    }

    [Fact]
    public void A_rehearsal_that_declines_ranks_nothing()
    {
        trials.Rehearse = (_, _) => Task.FromResult<RehearsalView?>(HandTrials.Declined());
        var page = Page();
        Button(page, "Search for better settings").Click();
        Assert.Empty(page.FindAll(".cands"));
        Assert.Contains("not to be trusted, so no candidate is ranked", page.Find(".calib").TextContent, StringComparison.Ordinal);
        Assert.StartsWith("No ranking: the recording cannot be reproduced", page.Find("#rehearsal .say").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void The_dials_are_rehearsed_as_they_stand_and_a_candidate_goes_back_to_them()
    {
        var page = Page();
        page.Find("#dial-historySteps").Input("2");
        Button(page, "Rehearse the dials").Click();
        Assert.Equal(new CouplingSettings { HistorySteps = 2 }, Assert.Single(trials.Rehearsed[0]!));
        page.FindAll(".cands button")[0].Click();
        Assert.Equal("8", page.Find("#dial-historySteps").GetAttribute("value"));
        Assert.Equal("rehearsed: history 8 steps", page.Find("#reason").GetAttribute("value"));
    }

    [Fact]
    public void A_long_rehearsal_can_be_cancelled()
    {
        trials.Rehearse = async (_, cancel) =>
        {
            await Task.Delay(Timeout.Infinite, cancel);
            return null;
        };
        var page = Page();
        Button(page, "Search for better settings").Click();
        Assert.Single(page.FindAll("progress"));
        Button(page, "Cancel").Click();
        page.WaitForAssertion(() => Assert.Contains("cancelled", page.Find("#rehearsal [role=status]").TextContent, StringComparison.Ordinal));
        Assert.Empty(page.FindAll("progress"));
    }

    [Fact]
    public void A_race_starts_with_a_reason_chosen_by_rule_or_with_the_dials_first()
    {
        var page = Page();
        Assert.True(page.Find(".racestart [type=submit]").HasAttribute("disabled"));
        page.Find("#dial-historySteps").Input("8");
        page.FindAll(".racestart input[name=challengers]")[2].Change("on");
        page.Find("#race-reason").Input("the basis is starved");
        page.Find(".racestart").Submit();
        var proposal = Assert.Single(trials.Started);
        Assert.Equal(new CouplingSettings { HistorySteps = 8 }, Assert.Single(proposal.Challengers!));
        Assert.True(proposal.FillUp);
        Assert.Equal((RaceScore.Iterations, "the basis is starved"), (proposal.ScoreBy, proposal.Reason));
    }

    [Fact]
    public void A_race_that_cannot_start_says_why()
    {
        trials.Start = _ => new RaceOutcome(null, "revision 1 is published but not applied yet");
        var page = Page();
        page.Find("#race-reason").Input("x");
        page.Find(".racestart").Submit();
        Assert.Contains("not applied yet", page.Find(".racestart [role=alert]").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void A_running_race_shows_its_arms_who_is_out_and_why_and_can_be_stopped()
    {
        var page = Page(HandDetails.Starved(HandLock.Now) with { Race = HandTrials.Running() });
        Assert.Equal(4, page.FindAll(".arm").Count);
        Assert.Contains("out in round 1: a step took 18 iterations", page.Find(".arm-out").TextContent, StringComparison.Ordinal);
        Assert.Contains("saved 58 iterations so far", page.Find(".race .facts").TextContent, StringComparison.Ordinal);
        Assert.Equal(2, page.FindAll(".arm")[1].QuerySelectorAll("circle").Length);
        Assert.Equal(32, page.FindAll(".racesteps svg rect").Count);
        Assert.Equal(3, page.FindAll(".racesteps rect.spill").Count);
        Assert.Empty(page.FindAll(".racestart, #publish form"));
        Button(page, "Stop the race").Click();
        Assert.Equal(["race-1"], trials.Stopped);
    }

    [Fact]
    public void A_race_goes_on_live_and_its_verdict_has_an_interval()
    {
        var page = Page(HandDetails.Starved(HandLock.Now) with { Race = HandTrials.Running() });
        feed.Details["leaf80-3"] = feed.Details["leaf80-3"] with { Race = HandTrials.Decided() };
        feed.Tell("leaf80-3");
        clock.Advance(LiveUpdates.Interval);
        page.WaitForAssertion(() => Assert.Contains("takes 7.0 iterations a step fewer", page.Find("#race .say").TextContent, StringComparison.Ordinal));
        Assert.Contains("−7.0 a step against the settings in use (−7.3 to −6.7, 94 % interval), from 5 paired rounds", page.Find("#race .a").TextContent, StringComparison.Ordinal);
        Assert.Contains("chosen among 3 challengers", page.Find("#race .a").TextContent, StringComparison.Ordinal);
        Assert.Contains("winner", page.FindAll(".arm")[1].TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void What_was_tried_is_published_with_its_reason_and_followed()
    {
        var page = Page();
        page.Find("#dial-historySteps").Input("8");
        page.Find("#reason").Input("rehearsed");
        page.Find("#publish form").Submit();
        Assert.Equal(new CouplingSettings { HistorySteps = 8 }, feed.Published[0].Proposal.Settings);
        feed.Details["leaf80-3"] = feed.Details["leaf80-3"].With(new SettingsRevision { Revision = 1, Settings = HandDetails.Settings(FilterRule.PivotRatio, 1e-2) with { HistorySteps = 8 }, State = RevisionState.Published });
        feed.Tell("leaf80-3");
        clock.Advance(LiveUpdates.Interval);
        page.WaitForAssertion(() => Assert.Contains("Revision 1 is published", page.Find("#became .say").TextContent, StringComparison.Ordinal));
        Assert.Contains("Publish revision 2", page.Find("#publish form [type=submit]").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void What_needs_a_restart_can_be_rehearsed_but_not_published_or_raced()
    {
        var page = Page();
        page.FindAll("input[name=dial-predictorOrder]")[2].Change("2");
        Assert.Contains("needs a restart", page.Find("#publish form .acts").TextContent, StringComparison.Ordinal);
        Assert.True(page.Find("#publish form [type=submit]").HasAttribute("disabled"));
        Assert.True(page.FindAll(".racestart input[name=challengers]")[1].HasAttribute("disabled"));
        Assert.False(Button(page, "Rehearse the dials").HasAttribute("disabled"));
    }

    [Fact]
    public void A_host_without_trials_says_so_and_still_publishes()
    {
        var page = Page(offered: false);
        Assert.Equal("This host offers no rehearsal.", page.Find("#rehearsal .say").TextContent);
        Assert.Equal("This host offers no race.", page.Find("#race .say").TextContent);
        Assert.Single(page.FindAll("#publish form"));
    }

    [Fact]
    public void A_run_without_a_basis_has_dials_and_no_ledger()
    {
        var page = Page(HandDetails.NotJudged(HandLock.Now));
        Assert.Equal("No basis to try a filter on.", page.Find("#try .say").TextContent);
        Assert.Empty(page.FindAll(".ledger"));
        Assert.Contains("declared nothing adjustable", page.Find("#publish").TextContent, StringComparison.Ordinal);
        Assert.Empty(page.FindAll("[style], script, style"));
    }
}
