using CouplingWatch.Monitoring.Checks.Start;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Numerics.Vectors;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Tests.Recordings;

/// <summary>Figures that a correct implementation of the written rules reproduces on the labelled recordings, worked out independently of this code.</summary>
public sealed class FigureTests
{
    [Theory]
    [InlineData("c01", 20, 1, FilterRule.OwnNorm, 1e-4, 12, 11, 7.026e4, 8.111e-3, 5.303e-3)]
    [InlineData("c01", 20, 1, FilterRule.OwnNorm, 1e-1, 12, 6, 41.44, 1.418e-1, 5.303e-3)]
    [InlineData("c01", 20, 1, FilterRule.PivotRatio, 1e-6, 12, 10, 6.948e4, 9.340e-3, 5.303e-3)]
    [InlineData("c01", 20, 1, FilterRule.PivotRatio, 1e-2, 12, 4, 712.6, 2.211e-1, 5.303e-3)]
    [InlineData("c11", 3, 4, FilterRule.PivotRatio, 1e-2, 82, 7, 173.7, 8.310e-2, 2.803e-2)]
    [InlineData("c23", 12, 2, FilterRule.OwnNorm, 1e-4, 14, 14, 8.995e4, 8.111e-4, 1.019e-2)]
    public void The_basis_has_these_columns_condition_and_promise(string name, int step, int iteration, FilterRule rule, double threshold, int all, int kept, double condition, double uncovered, double actual)
    {
        var recording = Recording.Of(name);
        var basis = recording.Until(step, iteration).Basis(step, iteration, rule, threshold);
        Assert.NotNull(basis);
        Assert.Equal(all, basis.Columns.Count);
        Assert.Equal(kept, basis.Kept);
        Assert.Equal(condition, basis.ConditionUnit!.Value, condition * 6e-4);
        Assert.Equal(uncovered, basis.Uncovered!.Value, uncovered * 6e-4);
        Assert.Equal(actual, Actual(recording, step, iteration), actual * 6e-4);
    }

    [Fact]
    public void A_basis_full_of_noise_claims_everything_and_removes_nothing()
    {
        var recording = Recording.Of("c10");
        var basis = recording.Until(1, 6).Basis(1, 6, FilterRule.OwnNorm, 1e-13)!;
        Assert.Equal(33, basis.Columns.Count);
        Assert.Equal(33, basis.Kept);
        Assert.InRange(basis.ConditionUnit!.Value, 1e11, 1e13);
        Assert.True(basis.Uncovered < 1e-9, $"c = {basis.Uncovered}");
        Assert.Equal(0.9285, Actual(recording, 1, 6), 5e-5);
    }

    [Theory]
    [InlineData("c01", 17, -9.1496, -0.0015, 0.1971, 0.1794)]
    [InlineData("c02", 52, -16.3830, -12.4241, 0.1151, 0.0649)]
    [InlineData("c08", 7, -9.1369, -0.1447, 0.1973, 0.1773)]
    [InlineData("c13", 6, -9.1404, -0.1439, 0.1972, 0.1772)]
    [InlineData("c23", 20, -9.1554, 0.0011, 0.1969, 0.1793)]
    public void The_spectrum_of_the_pass_gives_these_relaxations(string name, int directions, double smallest, double largest, double limit, double best)
    {
        var spectrum = Recording.Of(name).Judge().Spectrum();
        Assert.NotNull(spectrum);
        Assert.Equal(directions, spectrum.Directions);
        Assert.Equal(smallest, spectrum.LambdaMin!.Value, 6e-5);
        Assert.Equal(largest, spectrum.LambdaMax!.Value, 6e-5);
        Assert.Equal(limit, 2 / (1 - spectrum.LambdaMin.Value), 6e-5);
        Assert.Equal(best, 2 / (2 - spectrum.LambdaMin.Value - spectrum.LambdaMax.Value), 6e-5);
        if (name == "c02") return;
        Assert.Equal(limit, spectrum.RelaxationLimit!.Value, 6e-5);
        Assert.Equal(best, spectrum.RelaxationBest!.Value, 6e-5);
    }

    [Fact]
    public void No_relaxation_is_named_where_imaginary_parts_exceed_a_tenth_of_the_largest_value()
    {
        var spectrum = Recording.Of("c02").Judge().Spectrum()!;
        Assert.True(spectrum.Values.Max(v => Math.Abs(v.Imaginary)) > 0.1 * spectrum.Values.Max(v => Math.Sqrt(v.Real * v.Real + v.Imaginary * v.Imaginary)));
        Assert.Null(spectrum.RelaxationLimit);
        Assert.Null(spectrum.RelaxationBest);
        Assert.Contains("complex", spectrum.Why, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("c04", 5, -0.58080, 0.98714)]
    [InlineData("c08", 1, -0.02701, 0.99972)]
    [InlineData("c06", 0, 0.31156, -1.00000)]
    [InlineData("c13", 1, -0.03382, -0.99659)]
    public void At_iteration_12_the_slope_and_the_cosine_are_these(string name, int step, double slope, double cosine)
    {
        var state = Recording.Of(name).Until(step, 12).State;
        Assert.Equal(slope, Robust.Slope(state.Step.Z, 6).Slope, 6e-6);
        Assert.Equal(cosine, state.Step.Cosines[0], 6e-6);
    }

    [Theory]
    [InlineData("c01", 1.1667e-2, 6.9609e-4, 2.5700e-4)]
    [InlineData("c02", 9.9874, 2.5677, 0.58493)]
    [InlineData("c05", 1.2418e-2, 3.2671e-3, 1.2878e-3)]
    public void The_start_misses_the_end_of_the_step_by_this_much(string name, double constant, double linear, double quadratic)
    {
        var start = Recording.Of(name).Judge().Checks.OfType<StartCheck>().Single();
        Assert.Equal(constant, start.Error(0)!.Value, constant * 6e-5);
        Assert.Equal(linear, start.Error(1)!.Value, linear * 6e-5);
        Assert.Equal(quadratic, start.Error(2)!.Value, quadratic * 6e-5);
    }

    private static double Actual(Recording recording, int step, int iteration)
    {
        var norms = recording.Records.OfType<IterationRecord>().Where(i => i.Step == step).DistinctBy(i => i.Seq)
            .ToDictionary(i => i.Iteration, i => i.Sketch is { } sketch ? LongVector.Norm(sketch.Residual) : i.Residuals.Values[0]);
        return norms[iteration + 1] / norms[iteration];
    }
}
