using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Views;
using CouplingWatch.Records;
using CsCheck;

namespace CouplingWatch.Monitoring.Tests.Views;

public class StepPyramidTests
{
    [Fact]
    public void Thinning_loses_no_extreme_and_no_step()
    {
        Gen.Select(Gen.Int[1, 20_000], Gen.Int[1, 300], Gen.Int[0, int.MaxValue - 1]).Sample((steps, points, seed) =>
        {
            var random = new Random(seed);
            var pyramid = new StepPyramid();
            int worst = 0, unconverged = 0;
            for (var s = 0; s < steps; s++)
            {
                var capped = random.Next(1000) == 0;
                var iterations = random.Next(1, 9) + (random.Next(5000) == 0 ? 40 : 0);
                worst = Math.Max(worst, iterations);
                if (capped) unconverged++;
                pyramid.StepClosed(new RunState("r"), Closed(s, iterations, capped));
            }
            var bars = pyramid.Bars(null, null, points);
            Assert.InRange(bars.Count, 1, points);
            Assert.Equal(worst, bars.Max(b => b.Worst));
            Assert.Equal(unconverged, bars.Sum(b => b.Unconverged));
            Assert.Equal(0, bars[0].FromStep);
            Assert.Equal(steps - 1, bars[^1].ToStep);
            for (var i = 1; i < bars.Count; i++) Assert.Equal(bars[i - 1].ToStep + 1, bars[i].FromStep);
        }, iter: 60);
    }

    [Fact]
    public void A_million_steps_stay_in_bounded_memory()
    {
        var pyramid = new StepPyramid();
        var run = new RunState("r");
        for (var s = 0; s < 1_000_000; s++) pyramid.StepClosed(run, Closed(s, 4, false));
        Assert.InRange(pyramid.Bars(null, null, int.MaxValue).Count, 1, 5 * StepPyramid.Capacity);
        Assert.Equal(1_000_000, pyramid.Count);
    }

    [Fact]
    public void Rejected_attempts_mark_the_step_that_follows()
    {
        var pyramid = new StepPyramid();
        var run = new RunState("r");
        pyramid.StepClosed(run, Closed(0, 4, false));
        pyramid.StepClosed(run, Closed(1, 9, false) with { Outcome = StepOutcome.Rejected });
        pyramid.StepClosed(run, Closed(1, 5, false));
        Assert.Equal([0, 1], pyramid.Bars(null, null, 10).Select(b => b.Redone));
    }

    [Fact]
    public void A_number_of_bars_below_one_is_refused_with_its_value()
    {
        var refused = Assert.Throws<ArgumentOutOfRangeException>(() => new StepPyramid().Bars(null, null, 0));
        Assert.Equal(0, refused.ActualValue);
    }

    private static ClosedStep Closed(int step, int iterations, bool capped) =>
        new(step, 0, step, capped ? StepOutcome.Capped : StepOutcome.Converged, iterations, -0.5, 1e-8, true, step * 0.1, 0.1, step, step, null, 0);
}
