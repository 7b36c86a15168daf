using CouplingWatch.Coupling;
using CouplingWatch.Numerics.Secants;

namespace CouplingWatch.Monitoring.Tests.Synthetic;

/// <summary>Coupled problems of our own whose spectrum, load and noise are known, unlike those of the recordings.</summary>
public sealed class OwnProblemTests
{
    private static MethodSettings Pivot(double threshold) => new() { HistorySteps = 4, FilterRule = SecantFilter.PivotRatio, FilterThreshold = threshold };

    private static MethodSettings Own(double threshold, int history = 4) => new() { HistorySteps = history, FilterThreshold = threshold };

    private static MethodSettings Fixed(double relaxation) => new() { Method = MethodKind.Fixed, Relaxation = relaxation };

    [Theory]
    [InlineData(3)]
    [InlineData(2)]
    [InlineData(1)]
    [InlineData(0)]
    public void A_healthy_run_raises_nothing_at_any_level(int level)
    {
        Assert.Empty(new CoupledProblem { Level = level }.Judge().Alerts);
        Assert.Empty(new CoupledProblem { Level = level, Method = Pivot(1e-6) }.Judge().Alerts);
        Assert.Empty(new CoupledProblem { Level = level, Method = new() { Method = MethodKind.Aitken, Relaxation = 0.1 }, Steps = 15 }.Judge().Alerts);
    }

    public static TheoryData<string> Loads => ["wind", "pairs", "gusts", "periodic", "square"];

    [Theory]
    [MemberData(nameof(Loads))]
    public void A_strongly_varying_load_is_no_fault(string load)
    {
        Func<int, double> of = load switch
        {
            "wind" => n => 2 + Math.Sin(0.9 * n) + 0.7 * Math.Sin(2.3 * n + 1) + 0.4 * Math.Sin(5.1 * n),
            "pairs" => n => 1 + 0.02 * n + (n / 2 % 3 == 0 ? 3 : 0),
            "gusts" => n => 1 + 0.01 * n + (n * 7919 % 10 < 4 ? 3 + n % 5 : 0),
            "periodic" => n => 3 + 3 * Math.Sin(n / 4.0),
            _ => n => n / 10 % 2 == 0 ? 1 : 5,
        };
        foreach (var history in (int[])[0, 2, 4])
            Assert.Empty(new CoupledProblem { Cubic = 0.3, Load = of, Method = Own(1e-6, history), Steps = 60 }.Judge().Alerts);
    }

    [Theory]
    [InlineData(3)]
    [InlineData(2)]
    public void A_filter_that_leaves_out_the_newest_columns_starves_the_basis(int level)
    {
        var monitor = new CoupledProblem { Level = level, Method = Pivot(1e-1), Steps = 6 }.Judge();
        Assert.Contains(monitor.Alerts, a => a.Check == "starved" && a.Step == 0);
        Assert.Contains(monitor.AdviceGiven, a => a.Setting == "filterThreshold" && a.Move == "down" && a.Value == 1e-6);
        Assert.Contains(monitor.AdviceGiven, a => a.Setting == "filterRule" && a.To == "own-norm");
    }

    [Theory]
    [InlineData(3)]
    [InlineData(2)]
    public void Own_norm_with_a_huge_threshold_starves_the_basis_too(int level) =>
        Assert.Contains(new CoupledProblem { Level = level, Method = Own(0.5), Steps = 6 }.Judge().Alerts, a => a.Check == "starved");

    [Theory]
    [InlineData(3)]
    [InlineData(2)]
    public void Noise_that_differs_from_pass_to_pass_pollutes_a_basis_that_keeps_everything(int level)
    {
        var monitor = new CoupledProblem { Level = level, Noise = 1e-6, DeclaredNoise = 1e-6, Tolerance = 1e-6, Method = Own(1e-12), Steps = 10, Cap = 25 }.Judge();
        Assert.Contains(monitor.Alerts, a => a.Check == "polluted");
        Assert.Contains(monitor.AdviceGiven, a => a.Setting == "filterThreshold" && a.Move == "up" && a.Value is >= 1e-5 and <= 1e-2);
    }

    [Fact]
    public void A_floor_of_noise_above_the_target_is_named_with_the_solver_that_declares_it()
    {
        var monitor = new CoupledProblem { Noise = 1e-4, DeclaredNoise = 1e-4, Tolerance = 1e-6, Method = Own(1e-2), Steps = 3, Cap = 25 }.Judge();
        Assert.Contains(monitor.Alerts, a => a.Check == "noise-floor");
        Assert.Contains(monitor.AdviceGiven, a => a.Setting == "solverNoise" && a.Solver == "gate" && a.Value <= 1e-5);
    }

    [Theory]
    [InlineData(0.21)]
    [InlineData(0.3)]
    [InlineData(0.6)]
    public void Fixed_relaxation_above_its_limit_diverges_and_is_told_a_value_below_it(double relaxation)
    {
        // λ from −9 to 0: the limit is 2/(1 + 9) = 0.2.
        var monitor = new CoupledProblem { Method = Fixed(relaxation), Steps = 4, Cap = 60 }.Judge();
        Assert.Contains(monitor.Alerts, a => a.Check == "divergence");
        var advice = Assert.Single(monitor.AdviceGiven, a => a.Setting == "relaxation");
        Assert.Equal("down", advice.Move);
        Assert.InRange(advice.Value!.Value, 0.02, 0.2);
        Assert.Contains(monitor.AdviceGiven, a => a.Setting == "method" && a.To == "iqn-ils");
    }

    [Fact]
    public void Fixed_relaxation_close_to_its_limit_oscillates()
    {
        var monitor = new CoupledProblem { Method = Fixed(0.19), Steps = 2, Cap = 60 }.Judge();
        Assert.Contains(monitor.Alerts, a => a.Check == "oscillation");
        Assert.DoesNotContain(monitor.Alerts, a => a.Check == "divergence");
    }

    [Fact]
    public void An_alternating_residual_that_falls_quickly_is_no_fault() =>
        Assert.Empty(new CoupledProblem { Eigenvalue = _ => -9, Method = Fixed(0.14), Steps = 12, Cap = 60 }.Judge().Alerts);

    [Fact]
    public void A_crawling_relaxation_is_raised_no_further_than_the_directions_seen_allow()
    {
        var monitor = new CoupledProblem { Method = Fixed(0.01), Steps = 3, Cap = 60 }.Judge();
        Assert.Contains(monitor.Alerts, a => a.Check == "slow" && a.Iteration == 8);
        var advice = Assert.Single(monitor.AdviceGiven, a => a.Setting == "relaxation");
        Assert.Equal("up", advice.Move);
        Assert.InRange(advice.Value!.Value, 0.05, 0.2);
    }

    [Fact]
    public void A_run_whose_steps_grow_dearer_for_good_drifts()
    {
        var monitor = new CoupledProblem { Cubic = 1, Load = n => 0.02 * n * n, Steps = 60 }.Judge();
        Assert.Equal("drift", Assert.Single(monitor.Alerts).Check);
    }

    [Theory]
    [InlineData(3)]
    [InlineData(2)]
    public void Columns_of_another_problem_are_stale_not_polluted_and_the_advice_is_to_drop_them(int level)
    {
        var monitor = new CoupledProblem
        {
            Level = level,
            Eigenvalue = m => -9.0 / (m + 1),
            Strength = n => n < 15 ? 1 : 0.7,
            Load = n => n < 15 ? 1 + 0.02 * n : 1 + 0.5 * n,
            Cubic = 0.05,
            Method = Own(1e-8, 10),
            Steps = 22,
            Tolerance = 1e-8,
        }.Judge();
        var alert = Assert.Single(monitor.Alerts);
        // The problem changes at step 15. By the rule the alert comes with the third step from there on that is misled at first
        // (‖r₁‖ > 0.1 ‖r₀‖) and dear (two iterations or more above the median of the ten before it).
        var counts = monitor.Steps(null, null, int.MaxValue).Select(b => (double)b.Worst).ToArray();
        bool Misled(int step) => monitor.Iterations(step) is [var first, var second, ..] && second.Norm > 0.1 * first.Norm;
        bool Dear(int step) => counts[step] >= 2 + Numerics.Sequences.Quantile.Median(counts[(step - 10)..step]);
        var third = Enumerable.Range(15, counts.Length - 15).Where(n => Misled(n) && Dear(n)).ElementAt(2);
        Assert.Equal(("stale", third), (alert.Check, alert.Step));
        Assert.Contains(monitor.AdviceGiven, a => a.Setting == "dropHistory" && a.To == "once" && a.Because.Contains(alert.Id));
        Assert.Contains(monitor.AdviceGiven, a => a.Setting == "historySteps" && a.Move == "down" && a.Value == 5);
    }

    [Fact]
    public void A_code_without_step_records_is_judged_the_same()
    {
        Assert.Empty(new CoupledProblem { SendsStepRecords = false, Level = 0 }.Judge().Alerts);
        var silentCode = new CoupledProblem { SendsStepRecords = false, Level = 1, Steps = 30 }.Judge();
        Assert.Equal(30, silentCode.StepCount);
        var capped = new CoupledProblem { SendsStepRecords = false, Level = 1, Cap = 5, Method = Own(1e-4, 0), Steps = 6 }.Judge();
        Assert.Contains(capped.Alerts, a => a.Check == "capped");
        Assert.Contains(capped.Alerts, a => a.Check == "unconverged-run");
    }
}
