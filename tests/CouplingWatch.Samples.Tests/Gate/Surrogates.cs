using CouplingWatch.Records;
using LockGate.Cases;

namespace CouplingWatch.Samples.Tests.Gate;

public class Surrogates
{
    /// <summary>Cost of one evaluation of the coarser chamber in passes; measured 0.10 to 0.13.</summary>
    private const double Cost = 0.11;

    private static async Task<(IReadOnlyList<int> Counts, double NetMean, IReadOnlyList<IterationRecord> Iterations)> Run(bool surrogate, int historySteps)
    {
        var scenario = GateCases.Of(surrogate ? "surrogate" : "steady");
        var plan = scenario.Plan with { Settings = scenario.Plan.Settings with { HistorySteps = historySteps } };
        var (run, link) = await Case.RunAsync(scenario with { Plan = plan }, 40);
        var iterations = link.Records.OfType<IterationRecord>().ToList();
        var inner = iterations.Sum(r => r.Surrogate?.Iterations ?? 0);
        return (run.Counts, (iterations.Count + Cost * inner) / run.Counts.Count, iterations);
    }

    [Fact]
    public async Task A_coarser_chamber_pays_without_history_and_halves_the_first_step()
    {
        var with = await Run(surrogate: true, 0);
        var without = await Run(surrogate: false, 0);
        Assert.True(with.Counts[0] <= without.Counts[0] - 4, $"{without.Counts[0]} → {with.Counts[0]}"); // measured 10 → 5
        Assert.True(with.NetMean < without.NetMean - 1.5, $"{without.NetMean} → {with.NetMean}"); // 9.8 → 7.1
    }

    [Fact]
    public async Task With_four_steps_of_history_it_no_longer_pays()
    {
        var with = await Run(surrogate: true, 4);
        var without = await Run(surrogate: false, 4);
        Assert.True(with.NetMean > without.NetMean - 0.2, $"{without.NetMean} → {with.NetMean}"); // 4.0 → 4.4
    }

    [Fact]
    public async Task Every_update_says_what_the_surrogate_was_left_with_and_what_it_took()
    {
        var with = await Run(surrogate: true, 0);
        Assert.Equal(1, with.Iterations[0].Surrogate!.Covered!.Value, 1e-12);
        var reports = with.Iterations.Where(r => r.Surrogate is not null).Select(r => r.Surrogate!).ToList();
        Assert.All(reports, s =>
        {
            Assert.InRange(s.Covered!.Value, 0, 1);
            Assert.InRange(s.Iterations!.Value, 1, 40);
            Assert.True(s.Seconds > 0);
        });
    }

    [Fact]
    public async Task The_multi_step_method_needs_about_half_of_what_a_single_step_needs()
    {
        var (run, _) = await Case.RunAsync(GateCases.Of("multi-step"), 30);
        Assert.InRange(run.Counts.Skip(5).Average(), 4, 6.5); // measured 5.0 against 9.5
    }
}
