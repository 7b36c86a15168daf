using CouplingWatch.Numerics.Trials;

namespace CouplingWatch.Numerics.Tests.Trials;

public class PermutationIntervalTests
{
    [Fact]
    public void Five_rounds_span_their_differences_with_the_exact_confidence()
    {
        PermutationInterval interval = PermutationInterval.Of([10, 11, 9, 10, 12], [8, 10, 8, 6, 11]);
        Assert.Equal(-1.8, interval.Effect, 1e-12);
        Assert.Equal((-4.0, -1.0), (interval.Low, interval.High));
        Assert.Equal(1 - (2.0 / 32), interval.Confidence, 1e-12);
        Assert.Equal(5, interval.Rounds);
    }

    [Fact]
    public void The_interval_holds_what_the_sign_flip_test_does_not_reject()
    {
        // For every effect inside, at least 2k of the 2ⁿ sign patterns are as extreme as the one seen; outside, fewer.
        double[] zero = new double[8], challenger = [0.3, -1.2, 0.8, 2.1, 0.05, 1.4, -0.3, 0.9];
        PermutationInterval interval = PermutationInterval.Of(zero, challenger, 0.9);
        double rejected = 1 - interval.Confidence;
        Assert.InRange(rejected, 0.05, 0.1 + 1e-12);
        Assert.True(Probability(challenger, interval.Low + 1e-6) > rejected);
        Assert.True(Probability(challenger, interval.High - 1e-6) > rejected);
        Assert.True(Probability(challenger, interval.Low - 1e-6) <= rejected);
        Assert.True(Probability(challenger, interval.High + 1e-6) <= rejected);
    }

    [Fact]
    public void The_stated_confidence_is_met_on_symmetric_noise()
    {
        var random = new SplitMix64(77);
        int held = 0;
        const int trials = 4000;
        for (int t = 0; t < trials; t++)
        {
            double[] zero = new double[6], challenger = new double[6];
            for (int i = 0; i < 6; i++)
            {
                zero[i] = random.NextNormal();
                challenger[i] = zero[i] + 0.7 + ((random.NextDouble() - 0.5) * 3);
            }
            PermutationInterval interval = PermutationInterval.Of(zero, challenger, 0.9);
            if (interval.Low <= 0.7 && 0.7 <= interval.High) held++;
        }
        double expected = 1 - (2.0 * 3 / 64);
        Assert.InRange(held / (double)trials, expected - 0.02, expected + 0.02);
    }

    [Fact]
    public void Few_rounds_say_how_little_they_prove()
    {
        Assert.Equal(0.5, PermutationInterval.Of([1, 2], [0, 0], 0.9).Confidence, 1e-12);
        PermutationInterval one = PermutationInterval.Of([3], [2]);
        Assert.Equal((-1.0, double.NegativeInfinity, double.PositiveInfinity), (one.Effect, one.Low, one.High));
    }

    [Fact]
    public void Many_rounds_are_drawn_from_the_seed_and_repeat()
    {
        var random = new SplitMix64(5);
        double[] zero = new double[30], challenger = [.. Enumerable.Range(0, 30).Select(_ => 0.0)];
        for (int i = 0; i < 30; i++) challenger[i] = random.NextNormal() - 1;
        PermutationInterval first = PermutationInterval.Of(zero, challenger, 0.9, 42), second = PermutationInterval.Of(zero, challenger, 0.9, 42);
        Assert.Equal(first, second);
        Assert.True(first.High < 0 && first.Low < first.Effect && first.Effect < first.High);
        // Near the classical interval: effect ± 1.7 standard errors.
        double deviation = Math.Sqrt(challenger.Sum(d => (d - first.Effect) * (d - first.Effect)) / 29 / 30);
        Assert.Equal(first.Effect + (1.7 * deviation), first.High, 0.15 * deviation * 1.7);
    }

    [Fact]
    public void Bad_calls_are_refused()
    {
        Assert.Throws<ArgumentException>(() => PermutationInterval.Of([], []));
        Assert.Throws<ArgumentException>(() => PermutationInterval.Of([1], [1, 2]));
        Assert.Throws<ArgumentException>(() => PermutationInterval.Of([1], [double.NaN]));
        Assert.Throws<ArgumentOutOfRangeException>(() => PermutationInterval.Of([1], [1], 1));
    }

    [Fact]
    public void The_generator_gives_its_published_first_numbers()
    {
        // The published function of 0, 1, 2: each is the first output of that seed.
        Assert.Equal(0xe220a8397b1dcdafUL, First(0));
        Assert.Equal(0x910a2dec89025cc1UL, First(1));
        Assert.Equal(0x975835de1c9756ceUL, First(2));
        var random = new SplitMix64(1234567);
        Assert.Equal([6457827717110365317UL, 3203168211198807973UL, 9817491932198370423UL], [random.Next(), random.Next(), random.Next()]);

        static ulong First(ulong seed) => new SplitMix64(seed).Next();
    }

    [Fact]
    public void Uniform_normal_and_shuffled_numbers_look_like_what_they_claim()
    {
        var random = new SplitMix64(9);
        const int n = 20000;
        double uniform = 0, normal = 0, squares = 0;
        var counts = new int[7];
        for (int i = 0; i < n; i++)
        {
            double u = random.NextDouble();
            Assert.InRange(u, 0, 1 - 1e-16);
            uniform += u;
            double z = random.NextNormal();
            normal += z;
            squares += z * z;
            counts[random.NextInt(7)]++;
        }
        Assert.Equal(0.5, uniform / n, 0.01);
        Assert.Equal(0, normal / n, 0.03);
        Assert.Equal(1, squares / n, 0.04);
        Assert.All(counts, c => Assert.Equal(n / 7.0, c, 200.0));
        int[] items = [.. Enumerable.Range(0, 50)];
        random.Shuffle<int>(items);
        Assert.NotEqual(Enumerable.Range(0, 50), items);
        Assert.Equal(Enumerable.Range(0, 50), items.Order());
    }

    private static double Probability(double[] differences, double effect)
    {
        int n = differences.Length, extreme = 0;
        double seen = Math.Abs(differences.Sum(d => d - effect));
        for (int signs = 0; signs < 1 << n; signs++)
        {
            double sum = 0;
            for (int i = 0; i < n; i++) sum += (signs >> i & 1) != 0 ? differences[i] - effect : effect - differences[i];
            if (Math.Abs(sum) >= seen - 1e-12) extreme++;
        }
        return extreme / (double)(1 << n);
    }
}
