using Bunit;
using CouplingWatch.Components.Layout;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;

namespace CouplingWatch.Components.Tests.Layout;

public sealed class MainLayoutTests : PageTest
{
    private IRenderedComponent<MainLayout> Page() => Render<MainLayout>(p => p.Add(l => l.Body, b => b.AddMarkupContent(0, "<h1>Page</h1>")));

    [Fact]
    public void Every_page_has_its_landmarks_and_the_caution()
    {
        var page = Page();
        Assert.Single(page.FindAll("header"));
        Assert.Single(page.FindAll("nav[aria-label]"));
        Assert.Equal("#main", page.Find("a.skip").GetAttribute("href"));
        Assert.Equal("Page", page.Find("main#main h1").TextContent);
        Assert.Contains("This tool is no protection system.", page.Find("footer").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void The_navigation_counts_what_is_open()
    {
        var page = Page();
        Assert.Equal("Alerts, 5 open", page.FindAll("nav a")[1].TextContent);
        Feed.Alerts.Clear();
        Feed.Tell("leaf80-3");
        Clock.Advance(TimeSpan.FromSeconds(1));
        page.WaitForAssertion(() => Assert.Equal("Alerts, none open", page.FindAll("nav a")[1].TextContent));
    }

    [Fact]
    public void The_connection_line_announces_its_state_but_not_every_second()
    {
        var page = Page();
        Assert.Equal("Connected.", page.Find(".link-live [role=status]").TextContent);
        Assert.Contains("Last record 2 s ago.", page.Find(".link-live").TextContent, StringComparison.Ordinal);
        Clock.Advance(TimeSpan.FromSeconds(3));
        page.WaitForAssertion(() => Assert.Contains("Last record 5 s ago.", page.Find(".link-live").TextContent, StringComparison.Ordinal));
        Assert.Equal("Connected.", page.Find(".link-live [role=status]").TextContent);
    }

    [Fact]
    public void Before_the_first_record_it_waits()
    {
        Feed.LastRecordAt = null;
        Assert.Contains("Waiting for the first record.", Page().Find(".link-live").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void Paused_it_counts_the_records_that_wait()
    {
        var page = Page();
        page.Find("#pause").Click();
        Assert.Equal("Paused at 14:32; 0 records wait.", page.Find(".link-live [role=status]").TextContent);
        Feed.Set(Feed.Runs[2] with { NextSeq = 141 });
        Clock.Advance(TimeSpan.FromSeconds(1));
        page.WaitForAssertion(() => Assert.Equal("Paused at 14:32; 41 records wait.", page.Find(".link-live [role=status]").TextContent));
        page.Find("#pause").Click();
        Assert.Equal("Connected.", page.Find(".link-live [role=status]").TextContent);
    }

    [Fact]
    public void Without_a_circuit_nothing_pretends_to_be_live()
    {
        SetRendererInfo(new RendererInfo("Static", isInteractive: false));
        var page = Page();
        Assert.Equal("Connecting.", page.Find(".link-live [role=status]").TextContent);
        Assert.Empty(page.FindAll("#pause"));
        Assert.DoesNotContain("Last record", page.Markup, StringComparison.Ordinal);
    }

    [Fact]
    public void A_new_critical_alert_is_said_at_once_and_others_politely()
    {
        var page = Page();
        Assert.Equal("", page.Find("p[role=alert]").TextContent);
        Feed.Alerts.Add(HandAlerts.Of("leaf80-9", "divergence", Severity.Critical, 7, 5, 71, HandLock.Now, "the residual grows.", []));
        Feed.Alerts.Add(HandAlerts.Of("leaf80-9", "slow", Severity.Warning, 7, 5, 72, HandLock.Now, "step 7 is slow.", []));
        Feed.Tell("leaf80-9");
        Clock.Advance(TimeSpan.FromSeconds(1));
        page.WaitForAssertion(() => Assert.Equal("New critical: leaf80-9: the residual grows.", page.Find("p.unseen[role=alert]").TextContent));
        Assert.Equal("New warning: leaf80-9: step 7 is slow.", page.Find("p.unseen[role=status]").TextContent);
    }

    [Fact]
    public void Keys_are_off_until_asked_for() => Assert.False(Page().Find(".keys input[type=checkbox]").HasAttribute("checked"));

    [Fact]
    public async Task A_page_that_is_left_stops_listening()
    {
        _ = Page();
        Assert.Equal(1, Feed.Listeners);
        await DisposeComponentsAsync();
        Assert.Equal(0, Feed.Listeners);
    }
}
