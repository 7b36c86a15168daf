using CouplingWatch.Numerics.Sequences;
using CsCheck;

namespace CouplingWatch.Numerics.Tests.Sequences;

public class OrderStatisticsTests
{
    private static readonly Gen<double[]> Values = Gen.Double[-1e3, 1e3].Array[1, 40];

    [Theory]
    [InlineData(0.0, 1.0)]
    [InlineData(0.1, 1.3)]
    [InlineData(0.5, 2.5)]
    [InlineData(0.9, 3.7)]
    [InlineData(1.0, 4.0)]
    public void Quantiles_interpolate_at_n_minus_one_times_p(double p, double expected) =>
        Assert.Equal(expected, Quantile.Of([4, 1, 3, 2], p), 1e-12);

    [Fact]
    public void Quantiles_rise_with_p_stay_inside_and_leave_the_input_alone() => Values.Sample(values =>
    {
        double[] before = [.. values];
        double low = Quantile.Of(values, 0.1), middle = Quantile.Median(values), high = Quantile.Of(values, 0.9);
        Assert.True(values.Min() <= low && low <= middle && middle <= high && high <= values.Max());
        Assert.Equal(before, values);
    });

    [Fact]
    public void Median_and_spread_follow_shift_and_scale() => Values.Sample(values =>
    {
        double[] moved = [.. values.Select(v => (-4 * v) + 16)];
        Assert.Equal((-4 * Quantile.Median(values)) + 16, Quantile.Median(moved), 1e-9);
        Assert.Equal(4 * Quantile.MedianAbsoluteDeviation(values), Quantile.MedianAbsoluteDeviation(moved), 1e-9);
    });

    [Fact]
    public void Nothing_and_not_a_number_give_not_a_number()
    {
        Assert.True(double.IsNaN(Quantile.Median([])));
        Assert.True(double.IsNaN(Quantile.Of([1, double.NaN, 2], 0.9)));
        Assert.True(double.IsNaN(Quantile.MedianAbsoluteDeviation([1, double.NaN])));
        Assert.Equal(double.PositiveInfinity, Quantile.Of([1, double.PositiveInfinity, double.PositiveInfinity], 0.75));
        Assert.Throws<ArgumentOutOfRangeException>(() => Quantile.Of([1], 1.5));
    }

    [Fact]
    public void More_values_than_fit_the_stack_give_the_same_answer()
    {
        double[] values = [.. Enumerable.Range(0, 1001).Select(i => (double)(i * 617 % 1001))];
        Assert.Equal(500, Quantile.Median(values));
        Assert.Equal(250, Quantile.MedianAbsoluteDeviation(values));
    }

    [Fact]
    public void A_sorted_window_agrees_with_sorting_afresh() => Gen.Select(Gen.Int[1, 12], Gen.Int[0, 5].Array[0, 60]).Sample((capacity, values) =>
    {
        var window = new SortedWindow(capacity);
        for (int i = 0; i < values.Length; i++)
        {
            window.Add(values[i]);
            double[] latest = [.. values[Math.Max(0, i + 1 - capacity)..(i + 1)].Select(v => (double)v)];
            Assert.Equal(latest.Order(), window.Rising.ToArray());
            Assert.Equal(Quantile.Of(latest, 0.3), window.Quantile(0.3));
            Assert.Equal(Quantile.Median(latest), window.Median);
        }
    });

    [Fact]
    public void A_ring_window_holds_the_latest_in_order()
    {
        var window = new RingWindow(3);
        Assert.Equal((0, 3, false), (window.Count, window.Capacity, window.IsFull));
        foreach (double value in new[] { 1.0, 2, 3, 4, 5 }) window.Add(value);
        Assert.Equal((3.0, 5.0, 5.0), (window[0], window[2], window.Newest));
        double[] newest = new double[2];
        Assert.Equal(2, window.CopyNewest(newest));
        Assert.Equal([4, 5], newest);
        Assert.Throws<ArgumentOutOfRangeException>(() => window[3]);
        window.Clear();
        Assert.Equal(0, window.CopyNewest(newest));
        Assert.Throws<ArgumentOutOfRangeException>(() => new RingWindow(0));
    }

    [Fact]
    public void Slopes_follow_scale_and_tilt() => Gen.Double[-10, 10].Array[2, 20].Sample(values =>
    {
        TheilSen fit = TheilSen.Of(values);
        TheilSen tilted = TheilSen.Of([.. values.Select((v, i) => (2 * v) + (0.5 * i))]);
        Assert.Equal((2 * fit.Slope) + 0.5, tilted.Slope, 1e-9);
        Assert.Equal((2 * fit.Low) + 0.5, tilted.Low, 1e-9);
        Assert.Equal((2 * fit.High) + 0.5, tilted.High, 1e-9);
        Assert.True(fit.Low <= fit.Slope && fit.Slope <= fit.High);
    });

    [Fact]
    public void Slopes_of_nothing_one_or_bad_values_are_not_numbers()
    {
        Assert.True(double.IsNaN(TheilSen.Of([]).Slope));
        Assert.True(double.IsNaN(TheilSen.SlopeOf([3])));
        Assert.True(double.IsNaN(TheilSen.SlopeOf([1, double.NaN, 3])));
        Assert.Throws<ArgumentException>(() => TheilSen.Of([1], [1, 2]));
    }

    [Fact]
    public void Short_slopes_and_quantiles_allocate_nothing()
    {
        double[] values = [.. Enumerable.Range(0, 16).Select(i => Math.Sin(i))];
        var window = new SortedWindow(16);
        double sum = Once();
        long before = GC.GetAllocatedBytesForCurrentThread();
        for (int i = 0; i < 1000; i++) sum += Once();
        Assert.Equal(0, GC.GetAllocatedBytesForCurrentThread() - before);
        Assert.True(double.IsFinite(sum));

        double Once()
        {
            window.Add(values[5]);
            return TheilSen.Of(values).Slope + TheilSen.SlopeOf(values) + Quantile.Of(values, 0.9) + Quantile.MedianAbsoluteDeviation(values) + window.Quantile(0.1);
        }
    }

    [Fact]
    public void A_sum_refuses_not_a_number_and_bad_settings()
    {
        var cusum = new Cusum(0, 1);
        cusum.Add(3);
        Assert.Throws<ArgumentException>(() => cusum.Add(double.NaN));
        Assert.Equal(2.5, cusum.High);
        cusum.Reset();
        Assert.Equal((0.0, 0.0, 0, 0), (cusum.High, cusum.Low, cusum.HighRun, cusum.LowRun));
        Assert.True(double.IsNaN(cusum.ShiftedMeanHigh));
        Assert.Throws<ArgumentOutOfRangeException>(() => new Cusum(0, 0));
        Assert.Throws<ArgumentOutOfRangeException>(() => new Ewma(0, 1, 0));
        Assert.Throws<ArgumentException>(() => new Ewma(0, 1, 0.5).Add(double.NaN));
        Assert.Throws<ArgumentException>(() => MannKendall.Of([1, double.NaN]));
    }

    [Fact]
    public void Two_down_and_two_up_sides_mirror_each_other() => Gen.Double[-3, 3].Array[1, 30].Sample(values =>
    {
        Cusum plain = new(0, 1), mirrored = new(0, 1);
        foreach (double value in values)
        {
            plain.Add(value);
            mirrored.Add(-value);
        }
        Assert.Equal((plain.High, plain.Low, plain.HighRun, plain.LowRun), (mirrored.Low, mirrored.High, mirrored.LowRun, mirrored.HighRun));
    });
}
