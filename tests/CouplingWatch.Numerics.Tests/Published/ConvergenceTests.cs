using CouplingWatch.Numerics.Sequences;

namespace CouplingWatch.Numerics.Tests.Published;

/// <summary>
/// Error bounds and orders of known iterations. Sources: Banach's fixed-point theorem; Kelley, Iterative Methods for Linear and
/// Nonlinear Equations, SIAM 1995, §4.1 (from memory). Values recomputed here from the iterations themselves.
/// </summary>
public class ConvergenceTests
{
    [Fact]
    public void The_bound_after_the_fact_is_sharp_for_a_linear_sequence()
    {
        const double rate = 0.8;
        double increment = Math.Pow(rate, 10) - Math.Pow(rate, 11);
        Assert.Equal(0.02147483648, increment, 1e-15);
        Assert.Equal(0.08589934592, FixedPointError.Bound(rate, increment), 1e-15);
        Assert.Equal(Math.Pow(rate, 11), FixedPointError.Bound(rate, increment), 1e-15);
        Assert.Equal(Math.Pow(rate, 11), FixedPointError.BoundBeforehand(rate, 1 - rate, 11), 1e-15);
    }

    [Fact]
    public void The_bound_holds_for_the_cosine_and_the_signed_estimate_is_nearly_sharp()
    {
        double[] x = new double[11];
        x[0] = 1;
        for (int k = 1; k <= 10; k++) x[k] = Math.Cos(x[k - 1]);
        const double limit = 0.7390851332151607, rate = 0.6736120291832148;
        double increment = Math.Abs(x[10] - x[9]), error = Math.Abs(x[10] - limit);
        Assert.Equal(0.7442373549005569, x[10], 1e-15);
        Assert.Equal(0.0264858832, FixedPointError.Bound(rate, increment), 1e-10);
        Assert.True(error <= FixedPointError.Bound(rate, increment));
        Assert.Equal(0.005165279353200635, FixedPointError.Estimate(-rate, increment), 1e-12);
        Assert.Equal(1, FixedPointError.Estimate(-rate, increment) / error, 5e-3);
        Assert.True(ConvergenceRate.Signed(x) < 0);
    }

    [Theory]
    [InlineData(-0.406011567080347)]
    [InlineData(0.406011567080347)]
    [InlineData(-0.98)]
    public void A_synthetic_stream_gives_its_signed_rate_back(double rate)
    {
        double[] norms = [.. Enumerable.Range(0, 12).Select(k => 3.7 * Math.Pow(Math.Abs(rate), k))];
        double[] cosines = [.. Enumerable.Range(0, 11).Select(_ => (double)Math.Sign(rate))];
        Assert.Equal(rate, ConvergenceRate.Signed(norms, cosines), 1e-10);
        Assert.Equal(rate, ConvergenceRate.Signed(norms[10], norms[11], cosines[10]), 1e-10);
        double[] sequence = [.. Enumerable.Range(0, 12).Select(k => 5 + Math.Pow(rate, k))];
        Assert.Equal(rate, ConvergenceRate.Signed(sequence), 1e-8);
    }

    [Fact]
    public void Newton_has_order_two_and_then_only_rounding()
    {
        double[] x = new double[7];
        x[0] = 1;
        for (int k = 1; k < 7; k++) x[k] = (x[k - 1] + (2 / x[k - 1])) / 2;
        double[] d = [.. x.Skip(1).Select((value, k) => Math.Abs(value - x[k]))];
        Assert.Equal(1.9680992818391159, ConvergenceOrder.Of(d[0], d[1], d[2], x[3]), 1e-9);
        Assert.Equal(1.9995089548825717, ConvergenceOrder.Of(d[1], d[2], d[3], x[4]), 1e-6);
        Assert.Equal(1.999992266517273, ConvergenceOrder.Of(d[2], d[3], d[4], x[5]), 1e-3);
        Assert.True(double.IsNaN(ConvergenceOrder.Of(d[3], d[4], d[5], x[6])));
    }

    [Fact]
    public void The_secant_method_has_the_golden_order()
    {
        List<double> x = [1, 2];
        for (int k = 2; k < 8; k++)
        {
            double a = x[k - 2], b = x[k - 1];
            x.Add(b - (((b * b) - 2) * (b - a) / ((b * b) - (a * a))));
        }
        double[] errors = [.. x.Select(v => Math.Abs(v - Math.Sqrt(2)))];
        double[] expected = [2.02459328548992, 1.502252460406634, 1.6666193362999873];
        for (int k = 0; k < expected.Length; k++)
            Assert.Equal(expected[k], ConvergenceOrder.Of(errors[k + 2], errors[k + 3], errors[k + 4], 1), 1e-6);
        // The next one would be 1.6075, from an error of one unit in the last place: refused.
        Assert.True(double.IsNaN(ConvergenceOrder.Of(errors[5], errors[6], errors[7], 1)));
    }

    [Fact]
    public void A_linear_sequence_has_order_one() => Assert.Equal(1, ConvergenceOrder.Of(1, 0.5, 0.25, 1), 1e-12);

    [Fact]
    public void A_rate_of_one_or_more_bounds_nothing()
    {
        Assert.Equal(double.PositiveInfinity, FixedPointError.Bound(1, 1e-3));
        Assert.Equal(double.PositiveInfinity, FixedPointError.Estimate(-1.2, 1e-3));
        Assert.Throws<ArgumentOutOfRangeException>(() => FixedPointError.Bound(-0.5, 1));
    }
}
