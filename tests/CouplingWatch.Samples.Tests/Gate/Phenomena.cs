using CouplingWatch.Records;
using CouplingWatch.Samples.Tests.Runs;
using CouplingWatch.Wire;
using LockGate.Cases;

namespace CouplingWatch.Samples.Tests.Gate;

/// <summary>The phenomena the cases were made to show, computed: tolerant bounds around the measured figures.</summary>
public class Phenomena
{
    private static double Mean(IEnumerable<int> counts, int skip = 10) => counts.Skip(skip).Average();

    private static GateScenario Steady(CouplingSettings settings)
    {
        var steady = GateCases.Of("steady");
        return steady with { Plan = steady.Plan with { Settings = settings } };
    }

    [Theory]
    [InlineData(0, 8.5, 10.5)] // measured 9.5
    [InlineData(1, 5.2, 7.2)] // 6.0
    [InlineData(2, 4.1, 5.6)] // 4.8
    [InlineData(4, 3.3, 4.6)] // 3.8
    public async Task Iterations_a_step_fall_with_the_history(int historySteps, double low, double high)
    {
        var (run, _) = await Case.RunAsync(Steady(GateCases.Sound with { HistorySteps = historySteps }), 60);
        Assert.InRange(Mean(run.Counts), low, high);
    }

    [Fact]
    public async Task Aitken_needs_about_twenty_iterations_a_step()
    {
        var (run, _) = await Case.RunAsync(Steady(GateCases.Sound with { Method = CouplingMethod.Aitken }), 25);
        Assert.InRange(Mean(run.Counts, 5), 16, 26);
    }

    [Fact]
    public async Task A_strict_pivot_ratio_starves_the_basis_and_the_advised_settings_cure_it_in_the_running_leaf()
    {
        var link = new RecordingLink();
        link.PublishAfterStep[39] = new SettingsRevision { Revision = 1, Settings = new CouplingSettings { FilterThreshold = 1e-7 } };
        var (run, _) = await Case.RunAsync(GateCases.Of("starved"), 80, link);
        Assert.InRange(Mean(run.Counts.Take(40), 5), 8, 16);
        Assert.InRange(Mean(run.Counts, 45), 2.5, 5);
        var applied = Assert.Single(link.Records.OfType<AppliedRecord>());
        Assert.Equal(40, applied.FromStep);
        Assert.Equal(1e-7, applied.Settings!.FilterThreshold);
        Assert.Equal(FilterRule.PivotRatio, applied.Settings.FilterRule);
    }

    [Fact]
    public async Task In_the_starved_leaf_most_updates_leave_the_newest_column_out()
    {
        var (_, link) = await Case.RunAsync(GateCases.Of("starved"), 20);
        var updates = link.Records.OfType<IterationRecord>().Where(r => r.Basis is not null && r.Iteration > 2).ToList();
        var starved = updates.Count(r => r.Basis!.Left.Any(c => c.Step == r.Step && c.Iteration == r.Iteration - 1));
        Assert.True(starved > 0.5 * updates.Count, $"{starved} of {updates.Count}");
    }

    [Fact]
    public async Task Fixed_relaxation_above_the_limit_diverges_and_closes_the_run()
    {
        var (run, link) = await Case.RunAsync(GateCases.Of("diverging"), 10);
        Assert.Equal(CloseOutcome.Diverged, Assert.IsType<CloseRecord>(link.Records[^1]).Outcome);
        Assert.Equal(StepOutcome.Failed, Assert.IsType<StepRecord>(link.Records[^2]).Outcome);
        Assert.Single(run.Counts);
    }

    [Fact]
    public async Task Just_below_the_limit_the_residual_alternates()
    {
        var (_, link) = await Case.RunAsync(GateCases.Of("sawtooth"), 1);
        var residuals = link.Records.OfType<IterationRecord>().Select(r => r.Vectors!.Residual).ToList();
        for (var k = 35; k < 45; k++)
            Assert.True(residuals[k].Zip(residuals[k - 1], (a, b) => a * b).Sum() < 0);
    }

    [Fact]
    public async Task A_time_step_six_times_longer_makes_a_long_history_stale()
    {
        var (run, _) = await Case.RunAsync(GateCases.Of("stale"), 36);
        Assert.True(run.Counts[30] >= 2.5 * run.Counts.Skip(20).Take(10).Average(), string.Join(' ', run.Counts));
    }

    [Fact]
    public async Task A_hard_seal_met_in_motion_ends_a_healthy_run()
    {
        var (run, link) = await Case.RunAsync(GateCases.Of("hard-seal"), 150);
        Assert.InRange(run.Counts.Skip(2).Take(20).Average(), 2.5, 5.5);
        Assert.Equal(CloseOutcome.Diverged, Assert.IsType<CloseRecord>(link.Records[^1]).Outcome);
        Assert.InRange(run.Counts.Count, 60, 130);
    }

    [Fact]
    public async Task A_coarse_inner_solve_that_repeats_its_error_does_no_harm()
    {
        var (run, link) = await Case.RunAsync(GateCases.Of("repeated-noise"), 30);
        Assert.InRange(Mean(run.Counts, 5), 3, 6);
        Assert.DoesNotContain(link.Records.OfType<StepRecord>(), s => s.Outcome != StepOutcome.Converged);
    }
}
