using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Spectrum;
using CouplingWatch.Numerics.Tests.Secants;
using CouplingWatch.Numerics.Trials;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Tests.Spectrum;

public class RitzValuesTests
{
    [Fact]
    public void Eigenvalues_of_a_symmetric_pass_are_found_when_the_directions_span_their_space()
    {
        // Pass with eigenvalues −9.1 … on an orthonormal basis; six directions mix exactly six eigenvectors.
        double[] eigenvalues = [-9.1, -3.2, -1.1, -0.4, -0.1, 0.2];
        var (d, w) = Pairs(200, eigenvalues, 14, 3);
        RitzValues ritz = RitzValues.Of(d, w);
        Assert.Equal(6, ritz.Kept);
        for (int i = 0; i < 6; i++) Assert.Equal(eigenvalues[i], ritz.Values[i].Real, 1e-8);
        Assert.Equal(2 / 10.1, ritz.RelaxationLimit!.Value, 1e-9);
        Assert.Equal(2 / (2 + 9.1 - 0.2), ritz.RelaxationOptimum!.Value, 1e-9);
    }

    [Fact]
    public void At_the_limit_the_slowest_mode_neither_grows_nor_falls_and_at_the_optimum_the_extremes_balance()
    {
        var (d, w) = Pairs(100, [-9.1, -3.2, -1.1, -0.4, -0.1], 10, 4);
        RitzValues ritz = RitzValues.Of(d, w);
        Assert.Equal(-1, 1 + (ritz.RelaxationLimit!.Value * (ritz.Smallest - 1)), 1e-12);
        double optimum = ritz.RelaxationOptimum!.Value;
        Assert.Equal(1 + (optimum * (ritz.Largest - 1)), -(1 + (optimum * (ritz.Smallest - 1))), 1e-12);
    }

    [Fact]
    public void The_size_of_single_pairs_does_not_matter()
    {
        var (d, w) = Pairs(80, [-5, -2, -1, 0.1, 0.3], 12, 5);
        RitzValues plain = RitzValues.Of(d, w);
        double[] sizes = [.. Enumerable.Range(0, d.Count).Select(j => Math.Pow(10, (j * 7 % 11) - 8))];
        RitzValues scaled = RitzValues.Of([.. d.Select((v, j) => Columns.Combine((sizes[j], v)))], [.. w.Select((v, j) => Columns.Combine((sizes[j], v)))]);
        for (int i = 0; i < 5; i++) Assert.Equal(plain.Values[i].Real, scaled.Values[i].Real, 1e-10);
    }

    [Fact]
    public void No_relaxation_is_named_for_complex_values_or_too_few_directions()
    {
        // A rotating pass: eigenvalues ±2i besides real ones.
        var random = new SplitMix64(8);
        var d = new List<double[]>();
        var w = new List<double[]>();
        for (int j = 0; j < 12; j++)
        {
            double[] x = Columns.Normal(ref random, 6);
            d.Add(x);
            w.Add([2 * x[1], -2 * x[0], -x[2], -0.5 * x[3], 0.1 * x[4], 0.2 * x[5]]);
        }
        RitzValues turning = RitzValues.Of(d, w);
        Assert.Equal(1, turning.ImaginaryShare, 1e-9);
        Assert.Null(turning.RelaxationLimit);
        Assert.Null(turning.RelaxationOptimum);
        Assert.Equal(1, turning.LimitOfRealParts, 1e-9);

        var (few, fewOut) = Pairs(50, [-3, -1, -0.5], 8, 6);
        RitzValues three = RitzValues.Of(few, fewOut);
        Assert.Equal(3, three.Kept);
        Assert.False(three.EnoughDirections);
        Assert.Null(three.RelaxationLimit);
    }

    [Fact]
    public void Only_the_newest_sixty_pairs_count_and_bad_ones_do_not()
    {
        var (old, oldOut) = Pairs(40, [-50, -40, -30, -20, -10], 20, 9);
        var (d, w) = Pairs(40, [-5, -4, -3, -2, -1], 58, 10);
        d.AddRange([new double[40], [.. Enumerable.Repeat(double.NaN, 40)]]);
        w.AddRange([new double[40], new double[40]]);
        RitzValues ritz = RitzValues.Of([.. old, .. d], [.. oldOut, .. w]);
        Assert.Equal(5, ritz.Kept);
        Assert.Equal(-5, ritz.Smallest, 1e-8);
        Assert.Equal(0, RitzValues.Of([], []).Kept);
        Assert.Throws<ArgumentException>(() => RitzValues.Of(d, []));
    }

    /// <summary>Pairs of a symmetric pass with these eigenvalues; the inputs are random mixes of its eigenvectors.</summary>
    private static (List<double[]> D, List<double[]> W) Pairs(int rows, double[] eigenvalues, int count, ulong seed)
    {
        SecantBasis vectors = Columns.Basis(Columns.Normal(seed, rows, eigenvalues.Length));
        var random = new SplitMix64(seed + 100);
        var d = new List<double[]>();
        var w = new List<double[]>();
        for (int j = 0; j < count; j++)
        {
            double[] input = new double[rows], output = new double[rows];
            for (int k = 0; k < eigenvalues.Length; k++)
            {
                double share = random.NextNormal();
                LongVector.AddScaled(input, share, vectors.Direction(k));
                LongVector.AddScaled(output, share * eigenvalues[k], vectors.Direction(k));
            }
            d.Add(input);
            w.Add(output);
        }
        return (d, w);
    }
}
