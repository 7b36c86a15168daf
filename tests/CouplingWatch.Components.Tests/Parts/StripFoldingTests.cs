using CouplingWatch.Components.Parts;
using CouplingWatch.Wire;
using CsCheck;

namespace CouplingWatch.Components.Tests.Parts;

public sealed class StripFoldingTests
{
    private static readonly Gen<StripBar[]> Strips = Gen.Select(Gen.Int[1, 40], Gen.Double[-3, 1], Gen.Int[0, 1], Gen.Int[0, 1], Gen.Int[0, 9])
        .Array[0, 900].Select(all => all.Select((b, i) => new StripBar(i, i, b.Item1, b.Item1, b.Item2, b.Item3, b.Item4, b.Item5 == 0 ? i : null)).ToArray());

    [Fact]
    public void Folding_loses_no_extreme_and_no_step() => Gen.Select(Strips, Gen.Int[1, 400]).Sample((bars, most) =>
    {
        var folded = StripFolding.Fold(bars, most);
        Assert.True(folded.Count <= most);
        if (bars.Length == 0) return;
        Assert.Equal(bars[0].FromStep, folded[0].FromStep);
        Assert.Equal(bars[^1].ToStep, folded[^1].ToStep);
        for (var i = 1; i < folded.Count; i++) Assert.Equal(folded[i - 1].ToStep + 1, folded[i].FromStep);
        Assert.Equal(bars.Max(b => b.Worst), folded.Max(b => b.Worst));
        Assert.Equal(bars.Max(b => b.MarginDecades), folded.Max(b => b.MarginDecades));
        Assert.Equal(bars.Sum(b => b.Unconverged), folded.Sum(b => b.Unconverged));
        Assert.Equal(bars.Sum(b => b.Redone), folded.Sum(b => b.Redone));
        Assert.Equal(bars.Any(b => b.Revision is not null), folded.Any(b => b.Revision is not null));
        Assert.All(folded, f => Assert.InRange(f.Median, bars.Min(b => b.Median), f.Worst));
    }, iter: 300);

    [Fact]
    public void A_group_keeps_the_median_of_its_steps()
    {
        StripBar[] bars = [.. new[] { 4, 9, 5, 4, 4, 30 }.Select((n, i) => new StripBar(i, i, n, n, -1))];
        var folded = StripFolding.Fold(bars, 2);
        Assert.Equal([5.0, 4.0], folded.Select(f => f.Median));
        Assert.Equal([9, 30], folded.Select(f => f.Worst));
    }

    [Fact]
    public void Groups_of_different_length_count_by_their_steps()
    {
        StripBar[] bars = [new(0, 99, 3, 5, -1), new(100, 100, 40, 40, 0.1)];
        Assert.Equal(3, StripFolding.Fold(bars, 1)[0].Median);
    }

    [Fact]
    public void A_strip_that_fits_is_left_alone()
    {
        StripBar[] bars = [new(0, 0, 3, 3, null)];
        Assert.Same(bars, StripFolding.Fold(bars, 300));
    }

    [Fact]
    public void An_unknown_tolerance_stays_unknown() => Assert.Null(StripFolding.Fold([new(0, 0, 3, 3, null), new(1, 1, 4, 4, null)], 1)[0].MarginDecades);
}
