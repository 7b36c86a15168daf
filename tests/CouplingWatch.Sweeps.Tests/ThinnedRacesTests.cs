using CouplingWatch.Monitoring.Race;

namespace CouplingWatch.Sweeps.Tests;

/// <summary>A few of the races of the sweep, with the same goals: the real solves, the real machine, every arm run out to compare with.</summary>
public sealed class ThinnedRacesTests(ITestOutputHelper output)
{
    private static readonly (string Variant, string Start)[] Races =
    [
        ("plate, weak", "no history"), ("plate, weak", "aitken"), ("plate, noise 1e-5", "coarse"),
    ];

    [Fact]
    public void No_race_harms_and_most_end_near_the_best_arm()
    {
        var trials = Races.Select(r => RaceTrial.Run(
            Variants.All.Single(v => v.Name == r.Variant), Starts.All.Single(s => s.Name.StartsWith(r.Start, StringComparison.Ordinal)), new RaceOptions(), seed: 1)!).ToList();
        foreach (var trial in trials) output.WriteLine(RaceTable.Line(trial));
        output.WriteLine(RaceTable.Summary("thinned", trials));
        Assert.DoesNotContain(trials, t => t.Harmful);
        Assert.All(trials, t => Assert.True(t.Within(0.25), "near the best arm"));
        Assert.True(trials.Average(t => t.CappedByChallengers) <= 1, "at most one capped step by challengers a race");
        Assert.All(trials.Where(t => t.NothingToGain), t => Assert.InRange(t.Cost, double.NegativeInfinity, 60));
        Assert.True(trials.Sum(t => t.Cost) < 0, "together they save iterations");
    }

    [Fact]
    public void At_least_eight_variants_of_both_samples_are_swept_and_four_were_never_used_for_choosing()
    {
        Assert.Equal(8, Starts.All.Count);
        Assert.True(Variants.All.Count(v => v.Name.StartsWith("leaf", StringComparison.Ordinal)) >= 4);
        Assert.True(Variants.All.Count(v => v.Name.StartsWith("plate", StringComparison.Ordinal)) >= 4);
        Assert.True(Variants.All.Count(v => v.Held) >= 4);
    }
}
