using CouplingWatch.Monitoring.Race;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Race;

/// <summary>
/// Two arms whose settings make no difference, on counts that depend on the counts before them (as loads come and go). The order within a
/// round is drawn, so the interval of the race must cover zero; comparing the steps before a change with those after it must not be trusted.
/// </summary>
public sealed class RaceCoverageTests(ITestOutputHelper output)
{
    private const int Repetitions = 200;
    private const double Correlation = 0.9;

    [Fact]
    public void The_interval_of_a_race_without_effect_covers_zero_where_a_plain_before_and_after_does_not()
    {
        int covered = 0, withInterval = 0, coveredWithInterval = 0, published = 0, plain = 0;
        for (var seed = 0; seed < Repetitions; seed++)
        {
            var counts = Autocorrelated(seed);
            var view = new RaceTrack((step, _) => counts[step], challengers: 1, seed: seed, options: new RaceOptions { GuardFactor = 10 }).RunToTheEnd();
            var effect = view.Verdict!.Effect;
            var covers = effect is not { Low: { } low, High: { } high } || (low <= 0 && 0 <= high);
            if (covers) covered++;
            if (effect?.Low is not null)
            {
                withInterval++;
                if (covers) coveredWithInterval++;
            }
            if (view.Verdict.Code != "keep") published++;
            if (PlainComparisonCoversZero(counts)) plain++;
        }
        output.WriteLine($"race: {covered} of {Repetitions} cover zero; {withInterval} had an interval, {coveredWithInterval} of them cover; {published} published; before/after: {plain}");
        Assert.True(covered >= 0.93 * Repetitions, $"{covered} of {Repetitions} intervals cover zero");
        Assert.True(coveredWithInterval >= 0.93 * withInterval, $"{coveredWithInterval} of {withInterval} bounded intervals cover zero");
        Assert.True(withInterval >= Repetitions / 2, $"only {withInterval} races gave a bounded interval");
        Assert.True(plain < 0.75 * Repetitions, $"the plain comparison covers zero in {plain} of {Repetitions}");
    }

    /// <summary>Rounded counts around 15 with sd 3; first-order autoregression.</summary>
    private static int[] Autocorrelated(int seed)
    {
        var random = new Random(seed + 4711);
        var counts = new int[500];
        var state = Normal(random);
        for (var i = 0; i < counts.Length; i++)
        {
            counts[i] = Math.Clamp((int)Math.Round(15 + 3 * state), 2, 35);
            state = Correlation * state + Math.Sqrt(1 - Correlation * Correlation) * Normal(random);
        }
        return counts;
    }

    /// <summary>Twelve steps before against twelve after, difference of means ± 1.97 standard errors as if the counts were independent
    /// (1.97: the 93.75 % point of Student's t with 22 degrees of freedom).</summary>
    private static bool PlainComparisonCoversZero(int[] counts)
    {
        var before = counts.AsSpan(0, 12).ToArray();
        var after = counts.AsSpan(12, 12).ToArray();
        var error = Math.Sqrt((Variance(before) + Variance(after)) / 12);
        return Math.Abs(after.Average() - before.Average()) <= 1.97 * error;
    }

    private static double Variance(int[] values)
    {
        var mean = values.Average();
        return values.Sum(v => (v - mean) * (v - mean)) / (values.Length - 1);
    }

    private static double Normal(Random random) => Math.Sqrt(-2 * Math.Log(1 - random.NextDouble())) * Math.Cos(2 * Math.PI * random.NextDouble());
}
