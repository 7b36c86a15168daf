using Bunit;
using CouplingWatch.Components.Cost;
using CouplingWatch.Components.Log;
using CouplingWatch.Components.Spectrum;
using CouplingWatch.Components.Split;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.RunPage;

public class EvidenceTests : BunitContext
{
    private static readonly DateTimeOffset Now = HandLock.Now;

    public EvidenceTests() => JSInterop.Mode = JSRuntimeMode.Loose;

    [Fact]
    public void A_pass_is_one_bar_of_shares_with_the_word_of_its_promise()
    {
        var bars = Render<SplitBars>(p => p.Add(c => c.Bars, HandDetails.TwoFields(Now).Split));
        var rows = bars.FindAll(".split-row:not(.split-head):not([aria-hidden])");
        Assert.Equal(6, rows.Count);
        Assert.Contains("promise broken", rows[1].TextContent, StringComparison.Ordinal);
        Assert.Contains("pass not done yet", rows[5].TextContent, StringComparison.Ordinal);
        Assert.Equal(["p-hist", "p-unc"], rows[1].QuerySelectorAll("rect").Select(r => r.ClassName));
        Assert.Equal("99.3%", rows[1].QuerySelector(".p-hist")!.GetAttribute("width"));
        Assert.Contains("surrogate: none in use", bars.Markup, StringComparison.Ordinal);
    }

    [Fact]
    public void Only_the_newest_passes_are_drawn_and_their_room_does_not_shrink()
    {
        var bars = Render<SplitBars>(p => p.Add(c => c.Bars, HandDetails.Starved(Now).Split));
        Assert.Equal(12, bars.FindAll(".split-row:not(.split-head)").Count);
        Assert.Contains("The newest 12 of 20 passes", bars.Markup, StringComparison.Ordinal);
        bars.Render(p => p.Add(c => c.Bars, [.. HandDetails.Starved(Now).Split.Take(1)]));
        Assert.Equal(12, bars.FindAll(".split-row:not(.split-head)").Count);
    }

    [Fact]
    public void Shares_that_are_no_numbers_draw_nothing()
    {
        var bars = Render<SplitBars>(p => p.Add(c => c.Bars, [new SplitBar(0, double.NaN, 0.5, 0, double.NaN, null, null, "open")]));
        Assert.Equal(["p-hist"], bars.FindAll(".split-rows rect").Select(r => r.ClassName));
    }

    [Fact]
    public void Tamed_values_are_dots_and_the_others_triangles_counted_in_words()
    {
        var plane = Render<SpectrumPlane>(p => p.Add(c => c.View, HandDetails.TwoFields(Now).Spectrum!));
        Assert.Equal(10, plane.FindAll("circle.inn").Count);
        Assert.Equal(30, plane.FindAll("path.out").Count);
        Assert.Contains("30 not tamed, −27.0 to −26.8", plane.Markup, StringComparison.Ordinal);
        Assert.Contains("10 of 40 tamed by relaxation 0.1", plane.Find("svg").GetAttribute("aria-label"), StringComparison.Ordinal);
    }

    [Fact]
    public void The_disc_has_its_centre_and_radius_from_the_relaxation_on_both_axes_alike()
    {
        var scale = PlaneScale.Of([new RitzValue(-9, 0, true), new RitzValue(0, 0.5, true)], 0.1, 1080, 170);
        Assert.Equal(scale.X(1), scale.X(-9) + 10 * scale.Unit, 9);
        Assert.Equal(85 - 0.5 * scale.Unit, scale.Y(0.5), 9);
        Assert.InRange(scale.X(-9), 24, 1056);
        Assert.True(scale.Beyond(100));
        Assert.All(scale.Ticks(8), t => Assert.InRange(t, scale.Left, scale.Right));
        Assert.InRange(scale.Ticks(8).Count, 3, 9);
    }

    [Fact]
    public void Without_a_declared_relaxation_there_is_no_disc()
    {
        var view = HandDetails.Starved(Now).Spectrum! with { RelaxationInForce = null };
        Assert.Empty(Render<SpectrumPlane>(p => p.Add(c => c.View, view)).FindAll("circle.tamed"));
    }

    [Fact]
    public void Seconds_and_node_hours_are_bars_with_their_words()
    {
        var cost = HandDetails.Starved(Now).Cost!;
        Assert.Equal("water 2.4 min; leaf 5 s; waiting none", Render<SecondsBars>(p => p.Add(c => c.Cost, cost).Add(c => c.Serial, true)).Find("[role=img]").GetAttribute("aria-label"));
        var hours = Render<NodeHours>(p => p.Add(c => c.Cost, cost).Add(c => c.Left, 65));
        Assert.Equal("38 node-h spent, of them lost 6.1 node-h, to go 65 node-h", hours.Find("[role=img]").GetAttribute("aria-label"));
        Assert.Contains("send nodes", Render<NodeHours>(p => p.Add(c => c.Cost, cost with { NodeHoursSpent = null })).Find("p").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void The_part_of_the_end_after_the_allocation_is_marked()
    {
        var s = HandDetails.Starved(Now).Summary;
        var end = Render<ToTheEnd>(p => p.Add(c => c.Forecast, s.Forecast).Add(c => c.AllocationEndsAt, s.AllocationEndsAt).Add(c => c.Now, Now));
        Assert.Single(end.FindAll("rect.spill"));
        Assert.Single(end.FindAll("line.post"));
        var calm = Render<ToTheEnd>(p => p.Add(c => c.Forecast, s.Forecast).Add(c => c.AllocationEndsAt, null).Add(c => c.Now, Now));
        Assert.Empty(calm.FindAll("rect.spill, line.post"));
        Assert.Contains("No end is foretold", Render<ToTheEnd>(p => p.Add(c => c.Now, Now)).Markup, StringComparison.Ordinal);
    }

    [Fact]
    public void The_log_is_newest_first_and_filtered_by_kind()
    {
        var log = Render<RunLog>(p => p.Add(c => c.Entries, HandDetails.Starved(Now).Log).Add(c => c.Now, Now));
        Assert.Equal(["checkpoint", "closed", "alert", "checkpoint", "remark", "learning", "open"], log.FindAll("tbody tr td:nth-child(2)").Select(t => t.TextContent));
        log.FindAll("input")[0].Change(false);
        log.FindAll("input")[4].Change(false);
        Assert.Equal(["checkpoint", "checkpoint", "remark"], log.FindAll("tbody tr td:nth-child(2)").Select(t => t.TextContent));
        foreach (var box in new[] { 2, 3 }) log.FindAll("input")[box].Change(false);
        Assert.Contains("All 7 entries are filtered out", log.Markup, StringComparison.Ordinal);
    }

    [Fact]
    public void A_long_log_shows_its_newest_and_more_on_demand()
    {
        LogEntry[] many = [.. Enumerable.Range(0, 80).Select(i => new LogEntry(i, null, "note", $"entry {i}"))];
        var log = Render<RunLog>(p => p.Add(c => c.Entries, many).Add(c => c.Now, Now));
        Assert.Equal(25, log.FindAll("tbody tr").Count);
        log.Find("button").Click();
        Assert.Equal(75, log.FindAll("tbody tr").Count);
        Assert.Contains("entry 79", log.Find("tbody tr").TextContent, StringComparison.Ordinal);
    }
}
