using CouplingWatch.Records;
using CouplingWatch.Samples.Tests.Gate;
using LockGate.Cases;

namespace CouplingWatch.Samples.Tests.Runs;

public class RecordsOfARun
{
    [Fact]
    public async Task Every_iteration_carries_norms_that_its_vectors_bear_out()
    {
        var (_, link) = await Case.RunAsync(GateCases.Of("steady"), 6);
        foreach (var record in link.Records.OfType<IterationRecord>())
        {
            var residual = record.Vectors!.Residual;
            Assert.Equal(60, residual.Length);
            Assert.True(record.Residuals.TryGet("deflection", out var norm));
            Assert.Equal(Math.Sqrt(residual.Sum(v => v * v)), norm, 1e-12 * norm);
            var worst = Assert.Single(record.Worst);
            Assert.Equal(residual.Max(Math.Abs), Math.Abs(worst.Value));
            Assert.InRange(worst.At![1], 0.39, 12.01);
            Assert.Equal(["water", "leaf"], record.Seconds!.Names.ToArray());
        }
    }

    [Fact]
    public async Task The_basis_sent_removes_from_the_residual_what_it_promises_and_gives_the_next_vector()
    {
        var (_, link) = await Case.RunAsync(GateCases.Of("steady"), 6);
        var iterations = link.Records.OfType<IterationRecord>().ToDictionary(r => (r.Step, r.Iteration));
        foreach (var record in iterations.Values.Where(r => r.Basis is not null))
        {
            var basis = record.Basis!;
            Assert.Equal(basis.Columns.Length * (basis.Columns.Length + 1) / 2, basis.R!.Length);
            var next = (double[])record.Vectors!.Output.Clone();
            for (var c = 0; c < basis.Columns.Length; c++)
            {
                var earlier = iterations[(basis.Columns[c].Step, basis.Columns[c].Iteration)].Vectors!;
                var later = iterations[(basis.Columns[c].Step, basis.Columns[c].Iteration + 1)].Vectors!;
                for (var i = 0; i < next.Length; i++) next[i] += basis.Coefficients![c] * (later.Output[i] - earlier.Output[i]);
            }
            if (!iterations.TryGetValue((record.Step, record.Iteration + 1), out var following)) continue;
            for (var i = 0; i < next.Length; i++)
                Assert.Equal(next[i], following.Vectors!.Output[i] - following.Vectors.Residual[i], 1e-12);
        }
    }

    [Fact]
    public async Task A_step_is_converged_when_its_last_residual_meets_the_declared_tolerance()
    {
        var (run, link) = await Case.RunAsync(GateCases.Of("steady"), 6);
        foreach (var step in link.Records.OfType<StepRecord>())
        {
            Assert.Equal(run.Counts[step.Step], step.Iterations);
            var passes = link.Records.OfType<IterationRecord>().Where(r => r.Step == step.Step).ToList();
            for (var k = 0; k < passes.Count; k++)
            {
                passes[k].Residuals.TryGet("deflection", out var residual);
                passes[k].Magnitudes!.TryGet("deflection", out var magnitude);
                Assert.Equal(k == passes.Count - 1, residual <= Math.Max(1e-13, 1e-7 * magnitude));
            }
        }
    }

    [Fact]
    public async Task A_run_computes_the_same_numbers_every_time()
    {
        var (_, one) = await Case.RunAsync(GateCases.Of("starved"), 5);
        var (_, two) = await Case.RunAsync(GateCases.Of("starved"), 5);
        Assert.Equal(one.Records.OfType<IterationRecord>().SelectMany(r => r.Vectors!.Output), two.Records.OfType<IterationRecord>().SelectMany(r => r.Vectors!.Output));
    }
}
