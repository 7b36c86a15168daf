using Bunit;
using CouplingWatch.Components.Parts;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;
using CsCheck;

namespace CouplingWatch.Components.Tests.Parts;

public sealed class PairTests : PageTest
{
    [Fact]
    public void A_converging_step_draws_a_wedge_that_closes()
    {
        var pairs = PairDrawing.Of(HandStrip.Passes(6, 4.5, 3, 1.2, 0.1));
        Assert.Equal(pairs.Select(p => p.Gap).OrderDescending(), pairs.Select(p => p.Gap));
        Assert.Equal(6.0 / 7, pairs[0].Gap, 12);
    }

    [Fact]
    public void An_exploding_step_opens_although_its_need_stays_flat()
    {
        var pairs = PairDrawing.Of(HandStrip.Exploding(13));
        Assert.True(pairs[^1].Gap > pairs[1].Gap + 0.2);
        Assert.Equal("13 passes, opening", PairWords.Label(HandStrip.Exploding(13)));
    }

    [Fact]
    public void The_newest_pair_stands_at_the_seam_and_old_ones_are_cut()
    {
        var pairs = PairDrawing.Of(HandStrip.Passes([.. Enumerable.Range(0, 20).Select(i => 4.6 - 0.1 * i)]));
        Assert.Equal(PairDrawing.MostPairs, pairs.Count);
        Assert.Equal(125, pairs[^1].X, 6);
        Assert.All(pairs, p => Assert.InRange(p.X, 0, 134));
        Assert.Contains("…", Render<StepPairs>(p => p.Add(s => s.Passes, HandStrip.Passes([.. Enumerable.Range(0, 20).Select(i => 4.6)]))).Markup, StringComparison.Ordinal);
    }

    [Fact]
    public void A_pass_that_met_the_target_is_one_dash()
    {
        var pairs = PairDrawing.Of(HandStrip.Passes(3, 1, -0.2));
        Assert.Equal([false, false, true], pairs.Select(p => p.Single));
    }

    [Fact]
    public void Gaps_stay_within_the_drawing_whatever_comes() =>
        Gen.Select(Gen.Double[-400, 400], Gen.Double, Gen.Bool).Array[0, 40].Sample(all =>
        {
            var passes = all.Select((a, i) => new PassPair(i, a.Item3 ? a.Item1 : null, a.Item2, false)).ToList();
            Assert.All(PairDrawing.Of(passes), p => Assert.InRange(p.Gap, 0, 1));
        });

    [Theory]
    [InlineData(new double[] { }, "no pass yet")]
    [InlineData(new[] { 4.0 }, "one pass")]
    [InlineData(new[] { 5.0, 4, 3, 2, 1, 0.5 }, "six passes, closing")]
    [InlineData(new[] { 4.0, 4.0, 3.9 }, "three passes, staying apart")]
    [InlineData(new[] { 2.0, -0.1 }, "two passes, met")]
    public void The_step_in_progress_is_said_in_words(double[] needs, string words) => Assert.Equal(words, PairWords.Label(HandStrip.Passes(needs)));
}
