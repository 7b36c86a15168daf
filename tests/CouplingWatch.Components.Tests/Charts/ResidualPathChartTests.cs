using CouplingWatch.Components.Charts;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Charts;

public class ResidualPathChartTests
{
    private static readonly StepForecast ByPaths = new(4, 3, 5, "paths", 5, 3.6);

    private static FieldPath Deflection => HandDetails.TwoFields(HandLock.Now).Paths.Single(p => p.Governs);

    private static FieldPath Wall => HandDetails.TwoFields(HandLock.Now).Paths.Single(p => !p.Governs);

    [Fact]
    public void The_path_stands_over_the_band_with_the_target_at_one_and_a_double_line_at_now()
    {
        var spec = ResidualPathChart.Of(Deflection, ByPaths);
        Assert.Equal([SeriesRole.Band, SeriesRole.Cone, SeriesRole.Median, SeriesRole.Path], spec.Series.Select(s => s.Role));
        Assert.Equal(5.6, spec.Series[^1].Points[0].Y);
        Assert.Contains(spec.Rules, r => r is { Role: RuleRole.Target, At: 0, Before: "target" });
        Assert.Contains(spec.Rules, r => r is { Role: RuleRole.Now, At: 5, Before: "measured", After: "expected" });
        Assert.DoesNotContain(spec.Rules, r => r.Role == RuleRole.Cap);
    }

    [Fact]
    public void The_cone_runs_from_the_last_residual_to_the_target_between_its_quantiles()
    {
        var cone = ResidualPathChart.Of(Deflection, ByPaths).Series.Single(s => s.Role == SeriesRole.Cone).Points;
        Assert.Equal(new ChartPoint(5, 3.6, 3.6), cone[0]);
        Assert.Equal(8, cone[1].X);
        Assert.Equal(0, cone[1].Y);
        Assert.Equal(new ChartPoint(10, 0, 0), cone[^1]);
        Assert.Contains(ResidualPathChart.Of(Deflection, ByPaths).Notes, n => n.Text == "met at iteration 9 (8\u2060–\u206010)");
    }

    [Fact]
    public void A_field_that_does_not_govern_has_no_cone() =>
        Assert.DoesNotContain(ResidualPathChart.Of(Wall, ByPaths).Series, s => s.Role is SeriesRole.Cone or SeriesRole.Median);

    [Fact]
    public void Without_a_forecast_nothing_is_called_expected()
    {
        var spec = ResidualPathChart.Of(Deflection, null);
        Assert.DoesNotContain(spec.Series, s => s.Role is SeriesRole.Cone or SeriesRole.Median);
        Assert.Null(spec.Rules.Single(r => r.Role == RuleRole.Now).After);
        Assert.Empty(spec.Notes);
    }

    [Fact]
    public void A_forecast_by_the_rate_alone_says_so() =>
        Assert.Equal("48 more, by its rate", ResidualPathChart.Met(new StepForecast(48, 46, 51, "rate", 19, 2.17)));

    [Fact]
    public void The_cap_is_drawn_where_it_lies_in_view() =>
        Assert.Contains(ResidualPathChart.Of(Deflection, new StepForecast(48, 46, 51, "rate", 5, 3.6)).Rules, r => r is { Role: RuleRole.Cap, At: 39, Before: "cap 40" });

    [Fact]
    public void Without_a_tolerance_the_norm_stands_in_its_own_unit_without_target_band_and_cone()
    {
        var path = Deflection with { Target = null, Points = [.. Deflection.Points.Select(p => p with { Need = null })] };
        var spec = ResidualPathChart.Of(path, ByPaths);
        Assert.Equal([SeriesRole.Path], spec.Series.Select(s => s.Role));
        Assert.DoesNotContain(spec.Rules, r => r.Role == RuleRole.Target);
        Assert.Equal(Math.Log10(path.Points[0].Norm), spec.Series[0].Points[0].Y!.Value, 12);
        Assert.Equal(["iteration", "‖r‖, km"], ResidualPathChart.Columns(path));
    }

    [Fact]
    public void A_residual_that_is_no_number_leaves_a_gap_and_is_said()
    {
        var path = Deflection with { Points = [.. Deflection.Points, new PathPoint(6, double.NaN, null), new PathPoint(7, double.PositiveInfinity, double.PositiveInfinity)] };
        var spec = ResidualPathChart.Of(path, null);
        var drawn = spec.Series[^1].Points;
        Assert.Null(drawn[6].Y);
        Assert.Null(drawn[7].Y);
        Assert.Contains("not a number", drawn[6].Text, StringComparison.Ordinal);
        Assert.Contains("infinite", drawn[7].Text, StringComparison.Ordinal);
        Assert.NotEmpty(spec.ToJson());
    }

    [Fact]
    public void A_run_that_explodes_under_a_growing_target_also_shows_its_norm()
    {
        var path = HandDetails.Diverging(HandLock.Now).Paths[0];
        var second = ResidualPathChart.Of(path, null).Series.Single(s => s.Role == SeriesRole.Second).Points;
        Assert.Equal(4.7 + 11 * Math.Log10(2.05), second[^1].Y!.Value, 9);
    }

    [Fact]
    public void The_table_has_the_norm_to_its_last_digit_and_the_band_as_factors()
    {
        var path = Deflection with { Points = [new PathPoint(0, 1.234567891e-5, 2)], Band = [new BandPoint(0, 1, 3), new BandPoint(1, 0, 2)] };
        var rows = ResidualPathChart.Rows(path);
        Assert.Equal(["0", "1.234567891e-5", "100", "10.0", "1,000"], rows[0]);
        Assert.Equal(["1", "—", "—", "1.00", "100"], rows[1]);
    }

    [Fact]
    public void Before_the_first_iteration_axes_stand_alone()
    {
        var spec = ResidualPathChart.Of(new FieldPath { Field = "deflection", Target = 1e-8 }, null);
        Assert.DoesNotContain(spec.Rules, r => r.Role == RuleRole.Now);
        Assert.Empty(spec.Series.Single().Points);
    }
}
