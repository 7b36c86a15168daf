using CouplingWatch.Monitoring.Race;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using CsCheck;

namespace CouplingWatch.Monitoring.Tests.Race;

public sealed class ChallengerListTests
{
    private static readonly AdjustableSettings Everything = new()
    {
        Ranges = new Dictionary<string, NumberRange>
        {
            ["relaxation"] = new(0.01, 1),
            ["historySteps"] = new(0, 40),
            ["filterThreshold"] = new(1e-12, 0.1),
            ["predictorOrder"] = new(0, 2),
            ["iterationCap"] = new(5, 100),
            ["tolerance"] = new(1e-9, 1e-3),
        },
        Choices = new Dictionary<string, IReadOnlyList<string>> { ["filterRule"] = ["own-norm", "pivot-ratio"], ["method"] = ["fixed", "aitken", "iqn-ils"] },
        Commands = ["dropHistory"],
    };

    private static CouplingSettings QuasiNewton(int history, FilterRule rule, double threshold) => new()
    {
        Method = CouplingMethod.IqnIls,
        Relaxation = 0.1,
        HistorySteps = history,
        FilterRule = rule,
        FilterThreshold = threshold,
        IterationCap = 40,
        PredictorOrder = 1,
    };

    private static string[] Names(CouplingSettings inUse, double? noise, AdjustableSettings? adjustable = null, IReadOnlyList<RaceChallenger>? first = null) =>
        [.. ChallengerList.Propose(inUse, adjustable ?? Everything, noise, first).Challengers.Select(c => SettingsDifference.Describe(inUse, c.Settings))];

    [Fact]
    public void The_list_stands_in_the_written_order() => Assert.Equal(
        ["own-norm 1e-6", "own-norm 1e-6, history 4", "history 1", "history 4", "own-norm 1e-3", "pivot-ratio 1e-7"],
        [.. Names(QuasiNewton(2, FilterRule.PivotRatio, 1e-2), 1e-8).Select(n => n == "history 4, own-norm 1e-6" ? "own-norm 1e-6, history 4" : n)]);

    [Fact]
    public void A_history_of_four_meets_one_of_eight_once()
    {
        // ε_o is in use already, so its first entry falls away and "history doubled" repeats "the same with history 8".
        Assert.Equal(["history 8", "history 2", "own-norm 1e-3", "pivot-ratio 1e-6"], Names(QuasiNewton(4, FilterRule.OwnNorm, 1e-4), null));
    }

    [Fact]
    public void Without_history_two_and_eight_steps_are_tried() =>
        Assert.Equal(["history 4", "history 2", "history 8", "own-norm 1e-3", "pivot-ratio 1e-6"], Names(QuasiNewton(0, FilterRule.OwnNorm, 1e-4), null));

    [Fact]
    public void A_noisy_solver_gets_a_coarser_threshold()
    {
        // τ = 1e-3: ε_o = 1e-2, so the larger one is 1e-1; ε_p = 1e-4.
        Assert.Equal(["own-norm 0.01", "own-norm 0.01, history 4", "history 0", "history 2", "own-norm 0.1", "pivot-ratio 1e-4"], Names(QuasiNewton(1, FilterRule.OwnNorm, 1e-8), 1e-3));
    }

    [Fact]
    public void From_relaxation_the_quasi_newton_method_is_tried_with_three_histories()
    {
        var inUse = QuasiNewton(0, FilterRule.OwnNorm, 1e-2) with { Method = CouplingMethod.Aitken };
        Assert.Equal(["iqn-ils, own-norm 1e-4, history 4", "iqn-ils, own-norm 1e-4, history 8", "iqn-ils, own-norm 1e-4, history 1"], Names(inUse, null));
    }

    [Fact]
    public void Only_what_the_run_declared_adjustable_takes_part_and_the_rest_says_why()
    {
        var onlyHistory = new AdjustableSettings { Ranges = new Dictionary<string, NumberRange> { ["historySteps"] = new(0, 6) } };
        var choice = ChallengerList.Propose(QuasiNewton(4, FilterRule.PivotRatio, 1e-2), onlyHistory, null);
        Assert.Equal([2], choice.Challengers.Select(c => c.Settings.HistorySteps!.Value));
        Assert.Contains(choice.Refused, r => r.Why == "the run does not declare filterRule adjustable");
        Assert.Contains(choice.Refused, r => r.Why == "historySteps 8 lies outside 0 to 6");
    }

    [Fact]
    public void A_setting_the_run_does_not_state_is_never_changed_because_it_could_not_be_put_back()
    {
        var choice = ChallengerList.Propose(QuasiNewton(4, FilterRule.OwnNorm, 1e-4) with { FilterThreshold = null }, Everything, null);
        Assert.All(choice.Challengers, c => Assert.Null(c.Settings.FilterThreshold));
        Assert.Contains(choice.Refused, r => r.Why.Contains("could not go back", StringComparison.Ordinal));
    }

    [Fact]
    public void Own_challengers_and_the_rehearsals_come_first_and_results_are_never_altered()
    {
        var inUse = QuasiNewton(4, FilterRule.OwnNorm, 1e-4);
        var first = new[] { new RaceChallenger(inUse with { HistorySteps = 6 }, "person"), new RaceChallenger(inUse with { Tolerance = 1e-4 }, "person"), new RaceChallenger(inUse with { HistorySteps = 12 }, "rehearsal") };
        var choice = ChallengerList.Propose(inUse with { Tolerance = 1e-6 }, Everything, null, [.. first.Select(f => f with { Settings = f.Settings.With(new() { Tolerance = f.Settings.Tolerance ?? 1e-6 }) })]);
        Assert.Equal(["person", "rehearsal", "rule", "rule", "rule", "rule"], choice.Challengers.Select(c => c.Origin));
        Assert.Contains(choice.Refused, r => r.Why.Contains("alters the result", StringComparison.Ordinal));
    }

    [Fact]
    public void Never_more_than_six_never_twice_never_the_settings_in_use() =>
        Gen.Select(Gen.Int[0, 40], Gen.Bool, Gen.Int[1, 12], Gen.Int[1, 12], Gen.Int[0, 12])
            .Sample((history, byPivot, threshold, noise, own) =>
            {
                var inUse = QuasiNewton(history, byPivot ? FilterRule.PivotRatio : FilterRule.OwnNorm, Math.Pow(10, -threshold));
                var first = new RaceChallenger(inUse with { HistorySteps = own }, "person");
                var choice = ChallengerList.Propose(inUse, Everything, Math.Pow(10, -noise), [first, first]);
                var all = choice.Challengers.Select(c => c.Settings).Prepend(inUse).ToList();
                Assert.InRange(choice.Challengers.Count, 1, 6);
                for (var i = 0; i < all.Count; i++)
                    for (var j = 0; j < i; j++)
                        Assert.False(SettingsDifference.AreSame(all[i], all[j]));
                Assert.All(choice.Challengers, c => Assert.Null(SettingsDifference.Refusal(inUse, c.Settings, Everything)));
            });
}
