using CouplingWatch.Records;
using CouplingWatch.Testing;
using CouplingWatch.Testing.Streams;

namespace CouplingWatch.StreamTests.Streams;

public sealed class SyntheticStreamTests
{
    private static double[] Path(SyntheticStream stream, int step) => [.. stream.Records().OfType<IterationRecord>().Where(r => r.Step == step).Select(r => r.Residuals[0].Value)];

    [Fact]
    public void A_linear_stream_falls_by_its_factor_and_meets_its_target_with_the_last_pass_only()
    {
        foreach (var factor in (double[])[0.9, 0.5, 0.1, 0.03])
        {
            var stream = SyntheticStream.Linear(factor) with { Cap = 100 };
            var path = Path(stream, 3);
            for (var k = 1; k < path.Length; k++) Tolerance.Close(factor, path[k] / path[k - 1], 1e-12);
            if (factor < 0.79) Assert.True(path[^1] <= 1e-7 * (1 + 1e-12) && path[^2] > 1e-7, $"factor {factor}: {path[^2]} {path[^1]}");
        }
    }

    [Fact]
    public void Stall_divergence_and_alternation_are_what_they_say()
    {
        var stall = Path(SyntheticStream.Stall(0.1, 4, 2), 4);
        Assert.Equal(40, stall.Length);
        Assert.All(stall[2..], n => Assert.Equal(stall[2], n));
        var growth = Path(SyntheticStream.Divergence(0.1, 1.5, 4), 4);
        Tolerance.Close(1.5, growth[9] / growth[8], 1e-12);
        Assert.Equal([StepOutcome.Converged, StepOutcome.Capped], SyntheticStream.Divergence(0.1, 1.5, 4).Records().OfType<StepRecord>().Select(s => s.Outcome).Distinct());
        var alternating = Path(SyntheticStream.Alternating(0.4, 1), 0);
        Assert.True(alternating[1] > alternating[0] && alternating[2] < alternating[1], "every second iteration stands above the path");
    }
}
