using Bunit;
using CouplingWatch.Components.Parts;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Parts;

public sealed class ForecastBarTests : PageTest
{
    private static readonly DateTimeOffset Now = HandLock.Now;

    [Fact]
    public void All_lanes_share_one_clock_of_48_hours()
    {
        var drawn = ForecastDrawing.Of(Ends(24, 12, 36), Now.AddHours(48), Now, false);
        Assert.Equal(240, drawn.Median);
        Assert.Equal((120, 360), drawn.Band);
        Assert.Equal(120, drawn.To);
        Assert.Equal(480, drawn.Post);
        Assert.Null(drawn.Late);
        Assert.Equal("End of the run in 24.0 h, 12.0 h to 36.0 h; the allocation ends in 2.0 d", drawn.Label);
    }

    [Fact]
    public void The_part_of_the_band_after_the_allocation_is_marked() =>
        Assert.Equal((300, 480), ForecastDrawing.Of(Ends(33, 26, 60), Now.AddHours(30), Now, false).Late);

    [Fact]
    public void An_end_beyond_the_clock_is_an_arrow()
    {
        var drawn = ForecastDrawing.Of(Ends(90, 80, 100), null, Now, false);
        Assert.True(drawn.Beyond);
        Assert.Null(drawn.Median);
        Assert.Null(drawn.Post);
        Assert.Equal(480, drawn.To);
    }

    [Fact]
    public void A_run_that_is_overdue_ends_at_now()
    {
        var drawn = ForecastDrawing.Of(Ends(-2, -3, -1), Now.AddHours(-1), Now, false);
        Assert.Equal(0, drawn.Median);
        Assert.Null(drawn.Post);
        Assert.Contains("the allocation ended 60 min ago", drawn.Label, StringComparison.Ordinal);
    }

    [Fact]
    public void A_forecast_that_stands_still_is_dotted()
    {
        var bar = Render<ForecastBar>(p => p.Add(f => f.Forecast, Ends(24, 12, 36)).Add(f => f.AllocationEndsAt, Now.AddHours(16)).Add(f => f.Now, Now).Add(f => f.StandsStill, true));
        Assert.Single(bar.FindAll(".none"));
        Assert.Empty(bar.FindAll(".band"));
        Assert.Equal("No forecast; the allocation ends in 16.0 h", bar.Find("svg").GetAttribute("aria-label"));
    }

    [Fact]
    public void A_narrow_band_can_still_be_seen()
    {
        var drawn = ForecastDrawing.Of(Ends(10, 9.99, 10.01), null, Now, false);
        Assert.Equal(1, drawn.Band!.Value.To - drawn.Band.Value.From, 9);
    }

    private static RunForecast Ends(double hours, double early, double late) => new()
    {
        Ends = Now.AddHours(hours),
        EndsEarly = Now.AddHours(early),
        EndsLate = Now.AddHours(late),
        Text = "",
    };
}
