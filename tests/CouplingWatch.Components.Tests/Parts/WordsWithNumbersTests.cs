using Bunit;
using CouplingWatch.Components.Parts;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Parts;

public sealed class WordsWithNumbersTests : PageTest
{
    private static readonly Advice Lower = new() { Id = "a", Setting = "filterThreshold", Text = "lower the threshold 10⁻² → 10⁻⁷", Adjustable = true, Caveat = "A cleaner basis may cost a column." };

    [Fact]
    public void Advice_says_what_it_alters_and_whether_it_can_be_done_in_flight()
    {
        var line = Render<AdviceLine>(p => p.Add(a => a.Advice, Lower).Add(a => a.Full, true));
        Assert.Contains("Next: lower the threshold 10⁻² → 10⁻⁷.", line.Find(".next").TextContent, StringComparison.Ordinal);
        Assert.Contains("Alters the cost only, not the converged result. Adjustable in flight. A cleaner basis may cost a column.", line.Find(".small").TextContent, StringComparison.Ordinal);
        line.Render(p => p.Add(a => a.Advice, Lower with { Alters = "result", Adjustable = false }));
        Assert.Contains("Alters the converged result. Needs a restart", line.Find(".small").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void No_advice_is_said_too()
    {
        Assert.Equal("Next: nothing.", Render<AdviceLine>().Find(".next").TextContent);
        Assert.Equal("Next: nothing yet.", Render<AdviceLine>(p => p.Add(a => a.Learning, true)).Find(".next").TextContent);
    }

    [Fact]
    public void An_alert_says_who_has_it()
    {
        var now = HandLock.Now;
        Assert.Equal("unacknowledged", AlertWords.State(HandAlerts.Divergence(now), now));
        Assert.Equal("acknowledged by night shift, 13:20", AlertWords.State(HandAlerts.Starved(now), now));
        Assert.Equal("returned, unacknowledged", AlertWords.State(HandAlerts.Old(now)[0], now));
        Assert.Equal("shelved until Wed 08:02: cap set low on purpose, to compare with case 2", AlertWords.State(HandAlerts.Old(now)[1], now));
        Assert.Equal("Since 14:14, step 0, iteration 6 (seq 7). 18 min.", AlertWords.Since(HandAlerts.Divergence(now), now));
        Assert.Equal("Since 13:17, step 0, iteration 8 (seq 9); again in step 16. 75 min.", AlertWords.Since(HandAlerts.Starved(now), now));
        Assert.StartsWith("From Mon 23:32", AlertWords.Since(HandAlerts.Old(now)[0], now), StringComparison.Ordinal);
    }

    [Fact]
    public void An_alert_sentence_names_severity_state_and_run()
    {
        var sentence = Render<AlertSentence>(p => p.Add(a => a.Alert, HandAlerts.Divergence(HandLock.Now)).Add(a => a.Now, HandLock.Now).Add(a => a.Heading, true));
        Assert.Equal("critical · unacknowledged", sentence.Find("p.small").TextContent);
        Assert.Equal("runs/leaf95-1", sentence.Find("h2 a").GetAttribute("href"));
    }

    [Fact]
    public void The_numbers_of_a_plot_are_a_table_drawn_when_opened()
    {
        var made = 0;
        var table = Render<NumbersTable>(p => p.Add(t => t.Caption, "Residual by iteration").Add(t => t.Columns, ["iteration", "residual"])
            .Add(t => t.Rows, () => { made++; return (IReadOnlyList<IReadOnlyList<string>>)[["0", "3.1 × 10⁻⁴"], ["1", "8.0 × 10⁻⁵"]]; }));
        Assert.Equal(0, made);
        table.Find("details").TriggerEvent("ontoggle", EventArgs.Empty);
        Assert.Equal(2, table.FindAll("tbody tr").Count);
        Assert.Equal("Residual by iteration", table.Find("caption").TextContent);
        Assert.Equal(2, table.FindAll("tbody th[scope=row]").Count);
    }

    [Fact]
    public void A_dash_says_why()
    {
        var dash = Render<Unknown>(p => p.Add(u => u.Why, "no step is complete yet"));
        Assert.Equal("0", dash.Find(".unknown").GetAttribute("tabindex"));
        Assert.Contains("not known: no step is complete yet", dash.Markup, StringComparison.Ordinal);
    }
}
