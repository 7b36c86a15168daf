using CouplingWatch.Numerics.Sequences;

namespace CouplingWatch.Numerics.Tests.Published;

/// <summary>
/// Run lengths and a worked example. Sources: "Continuous inspection schemes", Biometrika 41 (1954) 100–115; "Exponentially weighted
/// moving average control schemes", Technometrics 32 (1990) 1–12; table and the 30 values after Montgomery, Introduction to
/// Statistical Quality Control, CUSUM chapter (from memory), every number recomputed by integral equation with 400 nodes.
/// </summary>
public class ControlSchemeTests
{
    private static readonly double[] Shifts = [0, 0.25, 0.5, 0.75, 1, 1.5, 2, 2.5, 3, 4];

    private static readonly double[] Values =
    [
        9.45, 7.99, 9.29, 11.66, 12.16, 10.18, 8.04, 11.46, 9.20, 10.34, 9.03, 11.47, 10.51, 9.40, 10.08,
        9.37, 10.62, 10.31, 8.52, 10.84, 10.90, 9.33, 12.29, 11.50, 10.60, 11.08, 10.38, 11.62, 11.31, 10.52,
    ];

    [Theory]
    [InlineData(4, new[] { 167.6838, 74.2240, 26.6302, 13.2851, 8.3831, 4.7472, 3.3428, 2.6195, 2.1945, 1.7085 })]
    [InlineData(5, new[] { 465.4435, 139.4937, 37.9961, 17.0483, 10.3760, 5.7472, 4.0089, 3.1137, 2.5733, 2.0126 })]
    public void Two_sided_cusum_run_lengths_are_the_published_ones(double limit, double[] lengths)
    {
        for (int i = 0; i < Shifts.Length; i++)
            Assert.Equal(lengths[i], RunLength.CusumTwoSided(0.5, limit, Shifts[i]), 1e-4);
    }

    [Theory]
    [InlineData(0.25, 8.01, 370.332)]
    [InlineData(0.5, 4.77, 368.561)]
    [InlineData(0.75, 3.34, 370.574)]
    [InlineData(1.0, 2.52, 372.815)]
    [InlineData(1.25, 1.99, 373.541)]
    [InlineData(1.5, 1.61, 376.340)]
    public void Pairs_of_allowance_and_limit_give_about_370_values_in_control(double allowance, double limit, double length) =>
        Assert.Equal(length, RunLength.CusumTwoSided(allowance, limit, 0), 1e-3);

    [Theory]
    [InlineData(0.4, 3.054, new[] { 499.951, 223.728, 71.201, 28.418, 14.263, 5.875, 3.522, 2.539, 2.019, 1.440 })]
    [InlineData(0.25, 2.998, new[] { 499.836, 170.296, 48.294, 20.115, 11.136, 5.464, 3.614, 2.745, 2.258, 1.727 })]
    [InlineData(0.2, 2.962, new[] { 499.735, 150.216, 41.764, 18.150, 10.542, 5.501, 3.743, 2.880, 2.381, 1.864 })]
    [InlineData(0.1, 2.814, new[] { 499.580, 106.322, 31.297, 15.848, 10.331, 6.084, 4.362, 3.442, 2.868, 2.193 })]
    [InlineData(0.05, 2.615, new[] { 499.933, 84.006, 28.764, 16.374, 11.383, 7.112, 5.225, 4.168, 3.496, 2.695 })]
    public void Moving_average_run_lengths_are_the_published_ones(double weight, double factor, double[] lengths)
    {
        for (int i = 0; i < Shifts.Length; i++)
            Assert.Equal(lengths[i], RunLength.Ewma(weight, factor, Shifts[i]), 1e-3);
    }

    [Fact]
    public void The_worked_cusum_example_signals_at_value_29_with_the_change_at_23()
    {
        var cusum = new Cusum(mean: 10, deviation: 1, allowance: 0.5);
        int signal = 0;
        for (int i = 1; i <= Values.Length && signal == 0; i++)
        {
            cusum.Add(Values[i - 1]);
            if (cusum.High > 5 || cusum.Low > 5) signal = i;
        }
        Assert.Equal(29, signal);
        Assert.Equal(5.28, cusum.High, 1e-9);
        Assert.Equal(7, cusum.HighRun);
        Assert.Equal(11.254285714285714, cusum.ShiftedMeanHigh, 1e-9);
    }

    [Fact]
    public void The_worked_moving_average_leaves_its_limits_at_value_29()
    {
        var average = new Ewma(mean: 10, deviation: 1, weight: 0.1);
        for (int i = 1; i <= Values.Length; i++)
        {
            average.Add(Values[i - 1]);
            if (i == 1) Assert.Equal(9.945, average.Value, 1e-12);
            if (i == 2) Assert.Equal(9.7495, average.Value, 1e-12);
            if (i == 28) Assert.Equal(10.573137, average.Value, 1e-6);
            if (i == 29)
            {
                Assert.Equal(10.646823, average.Value, 1e-6);
                Assert.Equal(0.6187, average.LimitHalfWidth(2.7), 1e-4);
            }
            Assert.Equal(i >= 29, average.IsOutside(2.7));
        }
    }
}
