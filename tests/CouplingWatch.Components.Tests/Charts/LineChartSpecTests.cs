using CouplingWatch.Components.Charts;
using CsCheck;

namespace CouplingWatch.Components.Tests.Charts;

public class LineChartSpecTests
{
    [Fact]
    public void A_long_series_is_thinned_to_at_most_five_hundred_points_and_keeps_its_extremes() =>
        Gen.Double[-12, 12].Array[501, 4000].Sample(values =>
        {
            var series = new ChartSeries(SeriesRole.Path, [.. values.Select((v, i) => new ChartPoint(i, v))]);
            var thin = series.Thinned(LineChartSpec.MostPoints);
            Assert.InRange(thin.Points.Count, 2, LineChartSpec.MostPoints);
            Assert.Equal(values.Min(), thin.Points.Min(p => p.Y));
            Assert.Equal(values.Max(), thin.Points.Max(p => p.Y));
            Assert.Equal(thin.Points.Select(p => p.X).Order(), thin.Points.Select(p => p.X));
        });

    [Fact]
    public void A_short_series_stays_as_it_is()
    {
        var series = new ChartSeries(SeriesRole.Path, [new(0, 1), new(1, null), new(2, 3)]);
        Assert.Same(series, series.Thinned(LineChartSpec.MostPoints));
    }

    [Fact]
    public void Gaps_do_not_break_the_thinning()
    {
        var series = new ChartSeries(SeriesRole.Path, [.. Enumerable.Range(0, 2000).Select(i => new ChartPoint(i, i % 3 == 0 ? null : i))]);
        Assert.Equal(1999, series.Thinned(500).Points.Max(p => p.Y));
    }

    [Fact]
    public void Equal_plots_give_equal_text_and_no_empty_members()
    {
        LineChartSpec Spec() => new() { X = NiceAxis.Counts(5), Y = NiceAxis.Decades([0, 3]), Series = [new(SeriesRole.Path, [new(0, 1.23456789, Text: "a")])], Rules = [new(RuleRole.Target, 0)] };
        Assert.Equal(Spec().ToJson(), Spec().ToJson());
        Assert.Contains("\"y\":1.2346", Spec().ToJson(), StringComparison.Ordinal);
        Assert.DoesNotContain("null", Spec().ToJson(), StringComparison.Ordinal);
    }

    [Theory]
    [InlineData(0, 4)]
    [InlineData(5, 5)]
    [InlineData(9, 10)]
    [InlineData(41, 50)]
    [InlineData(63, 70)]
    [InlineData(1000, 1000)]
    public void Counts_end_on_a_round_number(double last, double end)
    {
        var axis = NiceAxis.Counts(last);
        Assert.Equal(end, axis.High);
        Assert.Equal(axis.Ticks + 1, axis.Labels.Count);
        Assert.Equal(end.ToString("0", System.Globalization.CultureInfo.InvariantCulture), axis.Labels[^1]);
    }

    [Fact]
    public void Counts_hold_what_they_are_given_in_at_most_eight_intervals() =>
        Gen.Double[0, 1e7].Sample(last =>
        {
            var axis = NiceAxis.Counts(last);
            Assert.True(axis.High >= Math.Ceiling(last));
            Assert.InRange(axis.Ticks, 1, 8);
        });

    [Fact]
    public void Decades_hold_every_finite_value_on_even_powers() =>
        Gen.Double[-300, 300].Array[1, 20].Sample(values =>
        {
            var axis = NiceAxis.Decades([.. values, double.NaN, double.NegativeInfinity]);
            Assert.All(values, v => Assert.InRange(v, axis.Low, axis.High));
            Assert.InRange(axis.Ticks, 1, 8);
            Assert.Equal(0, axis.Low % 2);
        });

    [Fact]
    public void Decades_are_named_as_powers_of_ten_and_one() =>
        Assert.Equal(["10⁻⁴", "10⁻²", "1", "10²", "10⁴", "10⁶"], NiceAxis.Decades([-3.2, 5.1]).Labels);
}
