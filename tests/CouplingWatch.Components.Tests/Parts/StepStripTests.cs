using AngleSharp.Dom;
using Bunit;
using CouplingWatch.Components.Parts;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Parts;

public sealed class StepStripTests : PageTest
{
    private static readonly IReadOnlyList<StripBar> Sixteen = HandStrip.Of(HandLock.Now, [40, 19, 22, 10, 12, 7, 8, 6, 9, 10, 6, 7, 6, 16, 6, 6]);

    [Theory]
    [InlineData(0.4, 0)]
    [InlineData(-0.1, 0)]
    [InlineData(-0.15, 1)]
    [InlineData(-0.5, 2)]
    [InlineData(-1.1, 3)]
    [InlineData(-2.0, 4)]
    [InlineData(null, 2)]
    [InlineData(double.NaN, 2)]
    public void The_ink_is_the_margin_to_the_target(double? margin, int ink) => Assert.Equal(ink, StripDrawing.Ink(margin));

    [Fact]
    public void A_bar_of_full_height_is_the_runs_most_but_at_least_twelve()
    {
        Assert.Equal(40, StripDrawing.Of(Sixteen).Most);
        Assert.Equal(12, StripDrawing.Of([new(0, 0, 4, 4, -1)]).Most);
        Assert.Contains("M1.4 57.3h7.2V84h-7.2z", StripDrawing.Of([new(0, 0, 4, 4, -1)]).Inks[2], StringComparison.Ordinal);
    }

    [Fact]
    public void A_step_that_gave_up_is_marked_below_the_line_as_well()
    {
        var drawing = StripDrawing.Of(Sixteen);
        Assert.StartsWith("M1.4 4h7.2V84h-7.2z", drawing.Gave, StringComparison.Ordinal);
        Assert.Contains("M0.6 90h8.8v9h-8.8z", drawing.Gave, StringComparison.Ordinal);
    }

    [Fact]
    public void Redone_steps_are_hollow_with_a_bracket_and_a_gap_in_the_line()
    {
        var drawing = StripDrawing.Of([.. Sixteen.Select(b => b.FromStep is 5 or 6 ? b with { Redone = 1 } : b)]);
        Assert.Equal(2, drawing.Hollow.Count(c => c == 'z'));
        Assert.Equal("M51 88V97H69V88", drawing.Brackets);
        Assert.Equal("M0 84H68M72 84H160", drawing.BaseLine);
    }

    [Fact]
    public void A_change_of_settings_is_a_notch_before_its_first_step() =>
        Assert.Equal("M30.2 99V1h5", StripDrawing.Of([.. Sixteen.Select(b => b.FromStep == 3 ? b with { Revision = 1 } : b)]).Notches);

    [Fact]
    public void A_million_steps_draw_as_few_elements_as_a_hundred()
    {
        var million = Enumerable.Range(0, 2000).Select(i => new StripBar(i * 500, i * 500 + 499, 3 + i % 3, 6 + i % 5, -0.2 - 0.001 * i)).ToList();
        var strip = Render<StepStrip>(p => p.Add(s => s.Run, "basin-year").Add(s => s.Bars, million));
        Assert.True(strip.FindAll("path").Count <= 10);
        Assert.True(StripDrawing.Of(million).Bars.Count <= StripDrawing.MostBars);
        Assert.Contains("a bar is 3,500 steps: median, whisker to the worst", strip.Markup, StringComparison.Ordinal);
    }

    [Fact]
    public void The_drawing_says_the_same_in_words()
    {
        var strip = Render<StepStrip>(p => p.Add(s => s.Run, "leaf80-3").Add(s => s.Bars, Sixteen));
        Assert.Equal("16 steps, 6 to 40 iterations, most in step 0; 1 gave up", strip.Find("svg[role=img]").GetAttribute("aria-label"));
        Assert.Contains("step 0 gave up at 40 iterations", strip.Find(".axis").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void Walking_the_bars_reads_each_in_one_line()
    {
        var strip = Render<StepStrip>(p => p.Add(s => s.Run, "leaf80-3").Add(s => s.Bars, [.. Sixteen.Take(13), Sixteen[13] with { MarginDecades = Math.Log10(0.62) }]));
        var walk = strip.Find("input[type=range]");
        Assert.Equal("Steps of leaf80-3, one by one", walk.GetAttribute("aria-label"));
        walk.Input("13");
        Assert.Equal("step 13: 16 iterations, 0.62 of the target", strip.Find(".axis .one").TextContent);
        Assert.Equal("step 13: 16 iterations, 0.62 of the target", strip.Find("input").GetAttribute("aria-valuetext"));
        Assert.Single(strip.FindAll(".chosen-bar"));
        strip.Find("input").Blur();
        Assert.Empty(strip.FindAll(".chosen-bar"));
    }

    [Fact]
    public void Enter_opens_the_step()
    {
        StripBar? opened = null;
        var strip = Render<StepStrip>(p => p.Add(s => s.Run, "leaf80-3").Add(s => s.Bars, Sixteen).Add(s => s.OnOpen, b => opened = b));
        strip.Find("input").Input("4");
        strip.Find("input").KeyDown("Enter");
        Assert.Equal(4, opened?.FromStep);
    }

    [Fact]
    public void Before_the_first_complete_step_its_iterations_are_drawn()
    {
        var strip = Render<StepStrip>(p => p.Add(s => s.Run, "leaf95-1").Add(s => s.Bars, []).Add(s => s.Passes, HandStrip.Exploding(13)).Add(s => s.Diverging, true));
        Assert.Single(strip.FindAll("path.gave"));
        Assert.Contains("step 0, iteration by iteration: decades above the target", strip.Find(".axis").TextContent, StringComparison.Ordinal);
        Assert.Empty(strip.FindAll("input"));
    }

    [Fact]
    public void An_empty_run_is_a_line_and_words()
    {
        var strip = Render<StepStrip>(p => p.Add(s => s.Run, "new").Add(s => s.Bars, []));
        Assert.Equal("No step yet", strip.Find("svg").GetAttribute("aria-label"));
        Assert.Equal("no step yet", strip.Find(".axis").TextContent.Trim());
    }

    [Fact]
    public void Where_no_tolerance_is_known_the_axis_says_so()
    {
        var strip = Render<StepStrip>(p => p.Add(s => s.Run, "plain").Add(s => s.Bars, [new StripBar(0, 0, 4, 4, null), new StripBar(1, 1, 4, 4, null)]));
        Assert.Contains("one ink: no tolerance is known", strip.Find(".axis").TextContent, StringComparison.Ordinal);
        Assert.Single(strip.FindAll("path.b2"));
    }

    [Fact]
    public void The_last_look_is_a_dotted_upright_before_the_first_new_step()
    {
        var strip = Render<StepStrip>(p => p.Add(s => s.Run, "leaf80-3").Add(s => s.Bars, Sixteen).Add(s => s.LookedAtStep, 4));
        Assert.Equal("M40 0V98", strip.Find(".looked").GetAttribute("d"));
        strip.Render(p => p.Add(s => s.LookedAtStep, null));
        Assert.Empty(strip.FindAll(".looked"));
    }

    [Fact]
    public void The_chosen_bar_follows_the_newest_only_if_it_was_the_newest()
    {
        var strip = Render<StepStrip>(p => p.Add(s => s.Run, "leaf80-3").Add(s => s.Bars, [.. Sixteen.Take(10)]));
        strip.Find("input").Input("9");
        strip.Render(p => p.Add(s => s.Bars, [.. Sixteen.Take(11)]));
        Assert.StartsWith("step 10:", strip.Find(".one").TextContent, StringComparison.Ordinal);
        strip.Find("input").Input("2");
        strip.Render(p => p.Add(s => s.Bars, [.. Sixteen.Take(12)]));
        Assert.StartsWith("step 2:", strip.Find(".one").TextContent, StringComparison.Ordinal);
    }
}
