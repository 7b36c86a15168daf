using CouplingWatch.Monitoring.Race;
using CsCheck;

namespace CouplingWatch.Monitoring.Tests.Race;

public sealed class PairedEffectTests
{
    [Fact]
    public void Five_pairs_give_the_range_of_the_differences_with_fifteen_sixteenths_confidence()
    {
        var effect = PairedEffect.Of([-2, -1, -3, -2.5, -1.5]);
        Assert.Equal(-2, effect.Mean, 12);
        Assert.Equal((-3, -1, 1 - 2.0 / 32), (effect.Low!.Value, effect.High!.Value, effect.Level!.Value));
    }

    [Fact]
    public void Four_pairs_are_too_few_for_ninety_per_cent()
    {
        var effect = PairedEffect.Of([-2, -1, -3, -2.5]);
        Assert.Equal((null, null, null), (effect.Low, effect.High, effect.Level));
        Assert.Equal(0.875, PairedEffect.Of([-2, -1, -3, -2.5], 0.8).Level);
    }

    /// <summary>The definition itself: an effect lies inside exactly when flipping the signs of what is left does not refuse it.</summary>
    [Fact]
    public void The_interval_holds_exactly_the_effects_that_flipping_signs_does_not_refuse() =>
        Gen.Select(Gen.Int[-500, 500].Array[5, 8], Gen.Int[-600, 600]).Sample((hundredths, place) =>
        {
            // Off the grid of the subset means, so that no comparison hangs on rounding.
            var differences = hundredths.Select(h => h / 100.0).ToArray();
            var effect = place / 100.0 + 1.234e-5;
            var interval = PairedEffect.Of(differences);
            var n = differences.Length;
            var observed = Math.Abs(differences.Sum(d => d - effect));
            var asExtreme = 0;
            for (var signs = 0; signs < 1 << n; signs++)
            {
                var sum = 0.0;
                for (var i = 0; i < n; i++) sum += (signs >> i & 1) == 0 ? differences[i] - effect : effect - differences[i];
                if (Math.Abs(sum) >= observed - 1e-9) asExtreme++;
            }
            var inside = effect >= interval.Low && effect <= interval.High;
            Assert.Equal(asExtreme > (1 - interval.Level!.Value) * (1 << n) + 1e-9, inside);
        });

    [Fact]
    public void Differences_that_are_not_finite_are_refused_by_name()
    {
        var error = Assert.Throws<ArgumentOutOfRangeException>(() => PairedEffect.Of([1, double.NaN]));
        Assert.Equal("differences", error.ParamName);
    }
}
