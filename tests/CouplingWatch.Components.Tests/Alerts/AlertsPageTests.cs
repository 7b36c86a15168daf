using Bunit;
using CouplingWatch.Components.Alerts;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Alerts;

public sealed class AlertsPageTests : PageTest
{
    private static readonly DateTimeOffset Now = HandLock.Now;

    [Fact]
    public void What_waits_for_an_answer_comes_first()
    {
        var page = Render<AlertsPage>();
        Assert.Equal(["leaf95-1", "leaf60-4", "leaf80-5", "leaf80-3", "plate-7", "leaf80-2", "leaf60-1"], page.FindAll("article h2 a").Select(a => a.TextContent));
    }

    [Fact]
    public void What_a_cause_explains_does_not_shout_on_its_own()
    {
        var page = Render<AlertsPage>();
        Assert.Contains("Also seen, with the same cause: slow (step 16).", page.Find(".also").TextContent, StringComparison.Ordinal);
        Assert.DoesNotContain(page.FindAll("article h2"), h => h.TextContent.Contains("is slow", StringComparison.Ordinal));
        Assert.Contains("8 conditions, grouped by cause into 7.", page.Find(".load").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void An_alert_says_what_since_when_by_which_numbers_and_what_to_do()
    {
        var alert = Render<AlertsPage>().FindAll("article")[3];
        Assert.Contains("leaf80-3 loses time: its basis is starved", alert.TextContent, StringComparison.Ordinal);
        Assert.Contains("Since 13:17, step 0, iteration 8", alert.TextContent, StringComparison.Ordinal);
        Assert.Contains("10⁻²", alert.QuerySelector(".evidence")!.TextContent, StringComparison.Ordinal);
        Assert.Contains("Lower the threshold from 10⁻² to 10⁻⁷", alert.QuerySelector(".rows")!.TextContent, StringComparison.Ordinal);
        Assert.Contains("31 node-h of the 65 it can still spend, and about 8 steps too few in this allocation.", alert.QuerySelector(".rows")!.TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void Acknowledging_says_who_has_it()
    {
        var page = Render<AlertsPage>();
        page.Find("article .press.first").Click();
        Assert.Equal(["leaf95-1/divergence/7"], Feed.Acknowledged);
        page.WaitForAssertion(() => Assert.Contains("critical · acknowledged by day shift", page.FindAll("article")[0].TextContent, StringComparison.Ordinal));
    }

    [Fact]
    public void Shelving_needs_a_reason()
    {
        var page = Render<AlertsPage>();
        page.FindAll("article button").First(b => b.TextContent == "Shelve").Click();
        page.Find("form.shelve").Submit();
        Assert.Contains("Give a reason", page.Find(".problem").TextContent, StringComparison.Ordinal);
        page.Find("form.shelve input").Input("the valve is being replaced");
        page.Find("form.shelve select").Change("120");
        page.Find("form.shelve").Submit();
        page.WaitForAssertion(() => Assert.Contains("shelved until 16:31: the valve is being replaced", page.FindAll("article")[0].TextContent, StringComparison.Ordinal));
        Assert.Equal(Now.AddSeconds(-2).AddMinutes(120), Feed.Alerts.Single(a => a.Run == "leaf95-1").ShelvedUntil);
    }

    [Fact]
    public void A_shelved_alert_can_be_taken_up_again()
    {
        var page = Render<AlertsPage>();
        page.FindAll("article button").First(b => b.TextContent == "Take up again").Click();
        page.WaitForAssertion(() => Assert.Equal(AlertState.Unacknowledged, Feed.Alerts.Single(a => a.Run == "leaf60-1").State));
    }

    [Fact]
    public void An_act_the_server_refuses_is_said_beside_the_alert()
    {
        var page = Render<AlertsPage>();
        var gone = Feed.Alerts.Single(a => a.Run == "leaf95-1");
        Feed.Alerts.Remove(gone);
        Feed.Alerts.Add(gone with { Id = "another" });
        page.FindAll("article button").First(b => b.TextContent == "Acknowledge").Click();
        page.WaitForAssertion(() => Assert.DoesNotContain("leaf95-1/divergence/7", page.Markup, StringComparison.Ordinal));
    }

    [Fact]
    public void The_list_keeps_its_order_until_asked()
    {
        var page = Render<AlertsPage>();
        Feed.Alerts.Add(HandAlerts.Of("leaf80-9", "divergence", Severity.Critical, 7, 5, 71, Now, "the residual grows.", []));
        Feed.Tell("leaf80-9");
        Clock.Advance(TimeSpan.FromSeconds(1));
        page.WaitForAssertion(() => Assert.Equal(8, page.FindAll("article").Count));
        Assert.Equal("leaf80-9", page.FindAll("article h2 a")[^1].TextContent);
        Assert.Contains("The list has changed.", page.Find(".load").TextContent, StringComparison.Ordinal);
        page.FindAll("button").First(b => b.TextContent == "Put in order").Click();
        Assert.Equal("leaf80-9", page.FindAll("article h2 a")[0].TextContent);
    }

    [Fact]
    public void States_can_be_hidden()
    {
        var page = Render<AlertsPage>();
        page.FindAll(".filters input")[0].Change(false);
        Assert.Equal(["leaf80-3", "plate-7", "leaf60-1"], page.FindAll("article h2 a").Select(a => a.TextContent));
    }

    [Fact]
    public void Quiet_is_said_in_one_sentence()
    {
        Feed.Alerts.Clear();
        var page = Render<AlertsPage>();
        Assert.Equal("Nothing is wrong that anybody needs to answer.", page.Find(".nothing").TextContent);
        Assert.Contains("0 alerts in the last 24.0 h", page.Find(".load").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void The_small_plot_is_the_residual_of_its_step()
    {
        Feed.Iterations[("leaf95-1", 0)] = [.. Enumerable.Range(0, 13).Select(i => new IterationView(0, i, null, i + 1, new Dictionary<string, double> { ["d"] = 1e-3 * i }, 3e-4 * Math.Pow(2, i), 4.6, null, null, 0.3, false))];
        var page = Render<AlertsPage>();
        page.WaitForAssertion(() => Assert.StartsWith("Residual in step 0: 3.0 × 10⁻⁴ at iteration 0", page.Find("article .ev-plot").GetAttribute("aria-label"), StringComparison.Ordinal));
        Assert.Single(page.FindAll("article")[0].QuerySelectorAll(".ring"));
    }

    [Fact]
    public void The_page_needs_no_inline_style() => Assert.DoesNotContain("style=", Render<AlertsPage>().Markup, StringComparison.Ordinal);
}
