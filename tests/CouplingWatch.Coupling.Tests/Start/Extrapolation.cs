using CouplingWatch.Coupling.Start;

namespace CouplingWatch.Coupling.Tests.Start;

public class Extrapolation
{
    [Fact]
    public void Order_p_continues_a_polynomial_of_degree_p_exactly()
    {
        for (var order = 0; order <= 2; order++)
        {
            var start = new StartExtrapolation(1);
            for (var t = 1; t <= 5; t++) start.Accept([Math.Pow(t, order)]);
            var next = new double[1];
            start.Extrapolate(order, next);
            Assert.Equal(order == 0 ? 1 : Math.Pow(6, order), next[0], 1e-12);
        }
    }

    [Fact]
    public void The_order_is_lowered_while_few_steps_are_known()
    {
        var start = new StartExtrapolation(1);
        var next = new double[] { 9 };
        start.Extrapolate(2, next);
        Assert.Equal(0, next[0]);
        start.Accept([3]);
        start.Extrapolate(2, next);
        Assert.Equal(3, next[0]);
        start.Accept([5]);
        start.Extrapolate(2, next);
        Assert.Equal(7, next[0]);
        start.Forget();
        start.Extrapolate(2, next);
        Assert.Equal(5, next[0]);
    }

    [Fact]
    public void An_order_other_than_0_1_2_is_refused() =>
        Assert.Throws<ArgumentOutOfRangeException>(() => new StartExtrapolation(1).Extrapolate(3, new double[1]));
}
