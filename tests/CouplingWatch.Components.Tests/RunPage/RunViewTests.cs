using Bunit;
using CouplingWatch.Components.Feed;
using CouplingWatch.Components.Layout;
using CouplingWatch.Components.RunPage;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;
using Microsoft.Extensions.DependencyInjection;
using Microsoft.Extensions.Time.Testing;

namespace CouplingWatch.Components.Tests.RunPage;

public class RunViewTests : BunitContext
{
    private readonly HandFeed feed = HandLock.Feed();
    private readonly FakeTimeProvider clock = new(HandLock.Now);

    public RunViewTests()
    {
        JSInterop.Mode = JSRuntimeMode.Loose;
        Services.AddSingleton<IWatchFeed>(feed);
        Services.AddSingleton<TimeProvider>(clock);
        Services.AddWatchComponents();
        SetRendererInfo(new RendererInfo("Server", true));
        feed.Basis = (run, _, _, rule, threshold) => feed.Details[run].Basis is { } b ? HandDetails.Under(b, rule ?? b.Rule, threshold ?? b.Threshold) : null;
    }

    private IRenderedComponent<RunView> Page(RunDetail detail)
    {
        feed.Details[detail.Summary.Run] = detail;
        return Render<RunView>(p => p.Add(c => c.Run, detail.Summary.Run));
    }

    /// <summary>Changes the run and lets a quarter of a second pass.</summary>
    private void Change(IRenderedComponent<RunView> page, Func<RunDetail, RunDetail> change)
    {
        feed.Details[page.Instance.Run] = change(feed.Details[page.Instance.Run]);
        feed.Tell(page.Instance.Run);
        clock.Advance(LiveUpdates.Interval);
    }

    [Fact]
    public void The_page_asks_its_five_questions_below_the_verdict()
    {
        var page = Page(HandDetails.Starved(HandLock.Now));
        Assert.StartsWith("Losing time", page.Find("h1").TextContent, StringComparison.Ordinal);
        Assert.Equal(["Settings", "1Is it converging?", "2Is the basis sound?", "3What carries the residual?", "4What does a pass do?", "5What does it cost?"], page.FindAll(".q-head h2").Select(h => h.TextContent));
        Assert.Contains("hang: no beats are sent", page.Find(".cannot").TextContent, StringComparison.Ordinal);
        Assert.Equal("alerts", page.Find(".advice a").GetAttribute("href"));
    }

    [Fact]
    public void Nothing_on_the_page_carries_a_style_or_a_script_of_its_own()
    {
        var page = Page(HandDetails.TwoFields(HandLock.Now));
        Assert.Empty(page.FindAll("[style], script, style"));
    }

    [Fact]
    public void Every_drawing_has_a_label_or_is_hidden_from_the_reader()
    {
        var page = Page(HandDetails.TwoFields(HandLock.Now));
        var bare = page.FindAll("svg").Where(s => s.GetAttribute("aria-hidden") != "true" && string.IsNullOrEmpty(s.GetAttribute("aria-label")) && s.Closest("[aria-hidden=true],[role=img]") is null);
        Assert.Empty(bare.Select(s => s.OuterHtml[..Math.Min(120, s.OuterHtml.Length)]));
        Assert.All(page.FindAll("[role=img]"), i => Assert.False(string.IsNullOrWhiteSpace(i.GetAttribute("aria-label"))));
    }

    [Fact]
    public void A_run_that_does_not_exist_says_so_and_appears_with_its_first_record()
    {
        var page = Render<RunView>(p => p.Add(c => c.Run, "leaf99-1"));
        Assert.Contains("There is no run", page.Find("h1").TextContent, StringComparison.Ordinal);
        var detail = HandDetails.JustOpened(HandLock.Now);
        feed.Details["leaf99-1"] = detail with { Summary = detail.Summary with { Run = "leaf99-1" } };
        feed.Tell("leaf99-1");
        clock.Advance(LiveUpdates.Interval);
        page.WaitForAssertion(() => Assert.StartsWith("Learning", page.Find("h1").TextContent, StringComparison.Ordinal));
    }

    [Fact]
    public void A_run_that_was_only_opened_shows_each_panel_in_its_empty_state()
    {
        var page = Page(HandDetails.JustOpened(HandLock.Now));
        Assert.Contains("No iteration yet", page.Find("#converging").TextContent, StringComparison.Ordinal);
        Assert.Contains("Not judged", page.Find("#basis").TextContent, StringComparison.Ordinal);
        Assert.Contains("Nothing happened yet", page.Markup, StringComparison.Ordinal);
        Assert.Contains("Next: nothing yet.", page.Find(".next").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void What_cannot_be_judged_has_no_rows_and_says_what_to_send()
    {
        var page = Page(HandDetails.NotJudged(HandLock.Now));
        Assert.Empty(page.FindAll(".ledger"));
        Assert.Contains("send fields[].weight", page.Find("#basis").TextContent, StringComparison.Ordinal);
        Assert.Contains("No target is known", page.Find("#converging").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void A_change_of_the_run_shows_within_a_quarter_of_a_second()
    {
        var page = Page(HandDetails.Starved(HandLock.Now));
        Change(page, d => d with { Summary = d.Summary with { Iteration = 20, Verdict = new("gave-up", "Gave up", ": step 16 ended at its cap.") } });
        page.WaitForAssertion(() => Assert.StartsWith("Gave up", page.Find("h1").TextContent, StringComparison.Ordinal));
    }

    [Fact]
    public void A_paused_page_stands_still_and_catches_up_when_it_goes_on()
    {
        var page = Page(HandDetails.Starved(HandLock.Now));
        Services.GetRequiredService<LiveUpdates>().Pause();
        Change(page, d => d with { Summary = d.Summary with { Verdict = new("gave-up", "Gave up", ".") } });
        Assert.StartsWith("Losing time", page.Find("h1").TextContent, StringComparison.Ordinal);
        Services.GetRequiredService<LiveUpdates>().Resume();
        clock.Advance(LiveUpdates.Interval);
        page.WaitForAssertion(() => Assert.StartsWith("Gave up", page.Find("h1").TextContent, StringComparison.Ordinal));
    }

    [Fact]
    public async Task Leaving_the_page_ends_its_subscription()
    {
        Page(HandDetails.Starved(HandLock.Now));
        Assert.Equal(1, feed.Listeners);
        await DisposeComponentsAsync();
        Assert.Equal(0, feed.Listeners);
    }

    [Fact]
    public void The_advice_is_published_and_followed_until_its_effect_and_can_be_undone()
    {
        var page = Page(HandDetails.Starved(HandLock.Now));
        page.Find(".will .press.first").Click();
        Assert.Equal("1e-7", page.Find("#set-filterThreshold").GetAttribute("value"));
        Assert.Contains("10⁻²", page.Find(".oldnew").TextContent, StringComparison.Ordinal);
        Assert.Contains("10⁻⁷", page.Find(".oldnew .proposed").TextContent, StringComparison.Ordinal);
        page.Find("#reason").Input("the basis is starved");
        page.Find("form").Submit();

        var (run, proposal, madeFrom) = Assert.Single(feed.Published);
        Assert.Equal(("leaf80-3", 0, "the basis is starved"), (run, madeFrom, proposal.Reason));
        Assert.Equal(new CouplingSettings { FilterThreshold = 1e-7 }, proposal.Settings);
        Assert.Empty(page.FindAll("form"));

        var revision = new SettingsRevision { Revision = 1, Settings = HandDetails.Settings(FilterRule.PivotRatio, 1e-7), By = "day shift", At = HandLock.Now, Reason = "the basis is starved" };
        Change(page, d => d.With(revision));
        page.WaitForAssertion(() => Assert.Equal(3, page.FindAll(".steps4 .wait").Count));
        Assert.Contains("Revision 1 is on its way", page.Find(".will").TextContent, StringComparison.Ordinal);
        Assert.Empty(page.FindAll(".will .press.first"));
        Follow(page, revision with { State = RevisionState.PickedUp }, 2);
        Follow(page, revision with { State = RevisionState.Applied, FromStep = 17 }, 1);
        Follow(page, revision with { State = RevisionState.Applied, FromStep = 17, Effect = new RevisionEffect(8.0, 10, 4.1, 6) }, 0);
        Assert.Contains("8.0 → 4.1", page.Find(".effect").TextContent, StringComparison.Ordinal);
        Assert.Contains("biased towards improvement", page.Find(".steps4").TextContent, StringComparison.Ordinal);

        page.FindAll("button").Single(b => b.TextContent == "Undo: back to revision 0").Click();
        Assert.Equal((1, new CouplingSettings { FilterThreshold = 1e-2 }), (feed.Published[1].MadeFrom, feed.Published[1].Proposal.Settings));
    }

    private void Follow(IRenderedComponent<RunView> page, SettingsRevision revision, int waiting)
    {
        Change(page, d => d with { Revisions = [d.Revisions[0], revision] });
        page.WaitForAssertion(() => Assert.Equal(waiting, page.FindAll(".steps4 .wait").Count));
    }

    [Fact]
    public void A_refused_publication_says_why_and_keeps_what_was_written()
    {
        feed.Publish = (_, _, _) => new PublishOutcome(null, "revision 2 came first");
        var page = Page(HandDetails.Starved(HandLock.Now));
        page.Find(".will .press.first").Click();
        page.Find("form").Submit();
        Assert.Contains("revision 2 came first", page.Find("[role=alert].problem").TextContent, StringComparison.Ordinal);
        Assert.Equal("1e-7", page.Find("#set-filterThreshold").GetAttribute("value"));
    }

    [Fact]
    public void A_revision_that_the_code_refuses_is_shown_with_its_reason()
    {
        var run = HandDetails.Starved(HandLock.Now).With(new SettingsRevision { Revision = 1, Settings = HandDetails.Settings(FilterRule.PivotRatio, 1e-7), State = RevisionState.Refused, Refused = "not while the seal is in contact" });
        var page = Page(run);
        Assert.Contains("not while the seal is in contact", page.Find(".steps4 .refused").TextContent, StringComparison.Ordinal);
        Assert.DoesNotContain(page.FindAll("button"), b => b.TextContent.StartsWith("Undo", StringComparison.Ordinal));
    }

    [Fact]
    public void The_button_stays_shut_until_a_reason_stands_and_what_alters_the_result_is_confirmed()
    {
        var page = Page(HandDetails.Starved(HandLock.Now));
        page.Find("#change-settings").Click();
        Assert.True(page.Find("form [type=submit]").HasAttribute("disabled"));
        page.Find("#set-iterationCap").Input("60");
        page.Find("#reason").Input("harder steps ahead");
        Assert.True(page.Find("form [type=submit]").HasAttribute("disabled"));
        Assert.Contains("Alters the result: iteration cap", page.Find(".oldnew").TextContent, StringComparison.Ordinal);
        page.Find("label.alters input").Change(true);
        Assert.False(page.Find("form [type=submit]").HasAttribute("disabled"));
        page.Find("form").Submit();
        Assert.True(feed.Published[0].Proposal.Confirm);
    }

    [Fact]
    public void What_was_not_declared_adjustable_needs_a_restart_and_has_no_field()
    {
        var page = Page(HandDetails.Starved(HandLock.Now));
        page.Find("#change-settings").Click();
        Assert.Empty(page.FindAll("#set-method"));
        Assert.Contains("method iqn-ils", page.Find(".settingsform-fixed").TextContent, StringComparison.Ordinal);
        Assert.Contains("0.01 to 1", page.Find("#set-relaxation-may").TextContent, StringComparison.Ordinal);
        Assert.Empty(Page(HandDetails.TwoFields(HandLock.Now)).FindAll("#change-settings"));
    }

    [Fact]
    public void Another_revision_that_came_meanwhile_is_said_and_can_be_taken_over()
    {
        var page = Page(HandDetails.Starved(HandLock.Now));
        page.Find(".will .press.first").Click();
        Change(page, d => d.With(new SettingsRevision { Revision = 1, Settings = d.Settings with { HistorySteps = 8 }, State = RevisionState.Published }));
        page.WaitForAssertion(() => Assert.Contains("Another revision came meanwhile", page.Markup, StringComparison.Ordinal));
        page.FindAll("button").Single(b => b.TextContent == "Take over revision 1").Click();
        Assert.Contains("Publish revision 2", page.Find("form [type=submit]").TextContent, StringComparison.Ordinal);
        page.Find("form").Submit();
        Assert.Equal(1, feed.Published[0].MadeFrom);
    }

    [Fact]
    public void A_filter_tried_on_the_ledger_is_proposed_in_the_form()
    {
        var page = Page(HandDetails.Starved(HandLock.Now));
        page.Find(".ledger-type input").Input("1e-6");
        page.FindAll("button").Single(b => b.TextContent == "Propose it").Click();
        Assert.Contains("10⁻⁶", page.Find(".oldnew .proposed").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void A_row_of_the_what_if_table_moves_the_ledger()
    {
        var page = Page(HandDetails.Starved(HandLock.Now));
        page.FindAll(".whatif button")[1].Click();
        Assert.StartsWith("What if: pivot-ratio 10⁻⁷", page.Find(".ledger-says").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void A_step_of_the_strip_opens_its_iterations()
    {
        feed.Iterations[("leaf80-3", 15)] = [new IterationView(15, 0, null, 150, new Dictionary<string, double> { ["deflection"] = 1e-3 }, 1e-3, 2, null, null, 0.1, false), new IterationView(15, 1, null, 151, new Dictionary<string, double>(), 1e-6, -0.1, 0.001, 0, null, true)];
        var page = Page(HandDetails.Starved(HandLock.Now));
        page.Find(".walk").KeyDown("Enter");
        Assert.Equal(2, page.FindAll(".stepopen tbody tr").Count);
        page.FindAll(".stepopen button").Single().Click();
        Assert.Empty(page.FindAll(".stepopen"));
    }
}
