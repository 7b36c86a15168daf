using Bunit;
using CouplingWatch.Components.Charts;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components.Web;

namespace CouplingWatch.Components.Tests.Charts;

public class LineChartTests : BunitContext
{
    private readonly BunitJSModuleInterop script;

    public LineChartTests()
    {
        script = JSInterop.SetupModule("./js/line-chart.js");
        script.Mode = JSRuntimeMode.Loose;
    }

    private static LineChartSpec Spec(int points) => new()
    {
        X = NiceAxis.Counts(points),
        Y = NiceAxis.Decades([0, 4]),
        Series = [new(SeriesRole.Path, [.. Enumerable.Range(0, points).Select(i => new ChartPoint(i, i, Text: $"iteration {i}"))])],
    };

    private IRenderedComponent<LineChart> Chart(int points) => Render<LineChart>(p => p.Add(c => c.Spec, Spec(points)).Add(c => c.Label, "Residual in words").Add(c => c.Of, "iterations"));

    [Fact]
    public void The_plot_is_an_image_with_its_words()
    {
        var image = Chart(4).Find("[role=img]");
        Assert.Equal("Residual in words", image.GetAttribute("aria-label"));
    }

    [Fact]
    public void The_plot_is_sent_once_and_again_only_when_it_changed()
    {
        var chart = Chart(4);
        chart.Render(p => p.Add(c => c.Spec, Spec(4)));
        Assert.Single(script.Invocations["show"]);
        chart.Render(p => p.Add(c => c.Spec, Spec(5)));
        Assert.Equal(2, script.Invocations["show"].Count);
        Assert.Equal(Spec(5).ToJson(), script.Invocations["show"][1].Arguments[1]);
    }

    [Fact]
    public void Arrow_keys_walk_the_points_and_say_each()
    {
        var chart = Chart(3);
        var group = chart.Find("[role=group]");
        group.KeyDown("ArrowLeft");
        Assert.Equal("iteration 2", chart.Find(".readout").TextContent);
        group.KeyDown("ArrowLeft");
        Assert.Equal("iteration 1", chart.Find(".readout").TextContent);
        group.KeyDown("Home");
        Assert.Equal("iteration 0", chart.Find(".readout").TextContent);
        group.KeyDown("ArrowLeft");
        Assert.Equal("iteration 0", chart.Find(".readout").TextContent);
        Assert.Contains("cursor", (string)script.Invocations["show"][^1].Arguments[1]!, StringComparison.Ordinal);
        group.KeyDown("Escape");
        Assert.Equal("", chart.Find(".readout").TextContent);
        Assert.DoesNotContain("cursor", (string)script.Invocations["show"][^1].Arguments[1]!, StringComparison.Ordinal);
    }

    [Fact]
    public void Keys_on_an_empty_plot_do_nothing()
    {
        var chart = Chart(0);
        chart.Find("[role=group]").KeyDown("ArrowRight");
        Assert.Equal("", chart.Find(".readout").TextContent);
    }

    [Fact]
    public async Task The_drawing_is_taken_down_with_the_page()
    {
        Chart(3);
        await DisposeComponentsAsync();
        Assert.Single(script.Invocations["remove"]);
    }
}

public class PlotPartTests : BunitContext
{
    [Fact]
    public void Two_fields_stand_above_and_below_the_line_and_never_is_written_out()
    {
        var run = HandDetails.TwoFields(HandLock.Now);
        var strip = Render<GoverningStrip>(p => p.Add(c => c.Steps, run.Governing).Add(c => c.Fields, ["deflection", "wall temperature"]));
        Assert.Equal(17, strip.FindAll("rect.up").Count);
        Assert.Empty(strip.FindAll("rect.down"));
        Assert.Contains("wall temperature arrives last: never", strip.Find("[role=img]").GetAttribute("aria-label"), StringComparison.Ordinal);
    }

    [Fact]
    public void More_than_two_fields_have_a_row_each()
    {
        var strip = Render<GoverningStrip>(p => p.Add(c => c.Steps, [new GoverningStep(0, "a", 1), new GoverningStep(1, "b", 2)]).Add(c => c.Fields, ["a", "b", "c"]));
        Assert.Equal(3, strip.FindAll("svg").Count);
    }

    [Fact]
    public void One_field_is_a_sentence_and_no_step_is_one_too()
    {
        Assert.Contains("governs every step", Render<GoverningStrip>(p => p.Add(c => c.Steps, []).Add(c => c.Fields, ["a"])).Markup, StringComparison.Ordinal);
        Assert.Contains("No step is complete", Render<GoverningStrip>(p => p.Add(c => c.Steps, []).Add(c => c.Fields, ["a", "b"])).Markup, StringComparison.Ordinal);
    }

    [Fact]
    public void The_bar_of_the_worst_place_is_marked()
    {
        var path = HandDetails.Starved(HandLock.Now).Paths[0];
        var bars = Render<InterfaceBars>(p => p.Add(c => c.Path, path).Add(c => c.Size, 60));
        Assert.Equal(60, bars.FindAll("rect").Count);
        Assert.Equal("worst", bars.FindAll("rect")[10].ClassName);
        Assert.Contains("10⁻⁷ m at index 10", bars.Find(".along-worst").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void Of_a_long_interface_the_worst_falls_into_its_group_and_coordinates_are_said()
    {
        var path = HandDetails.Starved(HandLock.Now).Paths[0] with { Worst = new("deflection", 5999, -2e-7, [0, 11.2, 0]) };
        var bars = Render<InterfaceBars>(p => p.Add(c => c.Path, path).Add(c => c.Size, 6000));
        Assert.Equal("worst", bars.FindAll("rect")[59].ClassName);
        Assert.Contains("at (0, 11.2, 0)", bars.Find(".along-worst").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void Numbers_are_copied_as_tab_separated_text()
    {
        var copy = JSInterop.SetupModule("./js/copy.js");
        copy.Setup<bool>("copy", _ => true).SetResult(true);
        var numbers = Render<PlotNumbers>(p => p.Add(c => c.Caption, "Things").Add(c => c.Columns, ["a", "b"]).Add(c => c.Rows, () => [["1", "2"], ["3", "4"]]));
        numbers.Find("button").Click();
        Assert.Equal("a\tb\n1\t2\n3\t4", copy.Invocations["copy"][0].Arguments[0]);
        Assert.Equal("2 rows copied", numbers.Find("[role=status]").TextContent);
    }

    [Fact]
    public void A_browser_that_refuses_the_clipboard_is_said()
    {
        JSInterop.SetupModule("./js/copy.js").Setup<bool>("copy", _ => true).SetResult(false);
        var numbers = Render<PlotNumbers>(p => p.Add(c => c.Caption, "Things").Add(c => c.Columns, ["a"]).Add(c => c.Rows, () => [["1"]]));
        numbers.Find("button").Click();
        Assert.Contains("refused", numbers.Find("[role=status]").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void The_condition_plot_shows_the_error_axis_only_with_declared_noise()
    {
        var points = HandDetails.Starved(HandLock.Now).Condition;
        Assert.Null(ConditionChart.Of(points, null).Y.Opposite);
        var spec = ConditionChart.Of(points, 1e-8);
        Assert.Equal("10⁻⁸", spec.Y.Opposite![0]);
        Assert.Equal("step 16, now", spec.X.Labels[^1]);
        Assert.Contains("no basis", ConditionChart.InWords([]), StringComparison.Ordinal);
    }
}
