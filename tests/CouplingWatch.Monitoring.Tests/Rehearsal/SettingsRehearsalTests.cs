using System.Text.Json;
using CouplingWatch.Monitoring.Rehearsal;
using CouplingWatch.Monitoring.Tests.Recordings;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Rehearsal;

public sealed class SettingsRehearsalTests
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    private static readonly CouplingSettings[] Few = [new() { HistorySteps = 4 }, new() { HistorySteps = 8 }, new() { PredictorOrder = 2 }];

    [Fact]
    public void A_run_without_history_is_told_to_use_some()
    {
        var view = SettingsRehearsal.Prepare(Tapes.Tape("c03"), cancel: Cancel).Run(Few, cancel: Cancel);
        Assert.True(view.Calibration.Trusted);
        Assert.NotNull(view.Proposal);
        Assert.True(view.Proposal.Settings.HistorySteps > 0);
        Assert.True(view.Proposal.Mean < 0.85 * view.Calibration.Rehearsed);
        Assert.Equal(view.Candidates.OrderBy(c => c.Mean), view.Candidates);
    }

    [Fact]
    public void A_run_that_is_well_set_is_left_alone()
    {
        var view = SettingsRehearsal.Prepare(Tapes.Tape("c01"), cancel: Cancel).Run(Few, cancel: Cancel);
        Assert.True(view.Calibration.Trusted);
        Assert.Null(view.Proposal);
    }

    [Fact]
    public void A_starved_basis_cannot_be_reproduced_and_nothing_is_ranked()
    {
        var view = SettingsRehearsal.Prepare(Tapes.Tape("c11"), cancel: Cancel).Run(Few, cancel: Cancel);
        Assert.False(view.Calibration.Trusted);
        Assert.Empty(view.Candidates);
        Assert.Null(view.Proposal);
        Assert.NotNull(view.Calibration.Why);
    }

    [Theory]
    [InlineData("c20", "level 3")]
    [InlineData("c22", "level 3")]
    [InlineData("c26", "surrogate")]
    [InlineData("c25", "send weights")]
    public void It_declines_and_says_why(string recording, string because)
    {
        var calibration = SettingsRehearsal.Prepare(Tapes.Tape(recording), cancel: Cancel).Calibration;
        Assert.False(calibration.Trusted);
        Assert.Contains(because, calibration.Why, StringComparison.Ordinal);
    }

    [Fact]
    public void Five_steps_are_too_few_and_six_are_enough()
    {
        Assert.Contains("6 are needed", SettingsRehearsal.Prepare(Tapes.Tape("c01", until: 4), cancel: Cancel).Calibration.Why, StringComparison.Ordinal);
        Assert.Equal(2, SettingsRehearsal.Prepare(Tapes.Tape("c01", until: 5), cancel: Cancel).Calibration.Steps);
    }

    [Fact]
    public void A_change_of_regime_in_the_window_makes_it_decline()
    {
        var stale = new RehearsalCircumstances([new RaisedCheck("stale", 40, 40)]);
        Assert.Contains("regime changed", SettingsRehearsal.Prepare(Tapes.Tape("c01"), stale, Cancel).Calibration.Why, StringComparison.Ordinal);
        var long_ago = new RehearsalCircumstances([new RaisedCheck("stale", 20, 25)]);
        Assert.True(SettingsRehearsal.Prepare(Tapes.Tape("c01"), long_ago, Cancel).Calibration.Trusted);
    }

    [Fact]
    public void Noise_in_most_steps_makes_it_decline_in_half_of_them_it_does_not()
    {
        RehearsalCircumstances Noisy(int from) => new([new RaisedCheck("noise-floor", from, 44)]);
        Assert.Contains("noise", SettingsRehearsal.Prepare(Tapes.Tape("c01"), Noisy(38), Cancel).Calibration.Why, StringComparison.Ordinal);
        Assert.True(SettingsRehearsal.Prepare(Tapes.Tape("c01"), Noisy(39), Cancel).Calibration.Trusted);
    }

    [Fact]
    public void A_change_of_settings_in_the_window_makes_it_decline()
    {
        var tape = Tapes.Tape("c01", until: 40);
        tape.Observe(new AppliedRecord { Revision = 1, FromStep = 41, Settings = tape.Settings with { HistorySteps = 2 } });
        foreach (var record in Recording.Of("c01").Records.Where(r => r is IterationRecord { Step: > 40 } or StepRecord { Step: > 40 })) tape.Observe(record);
        Assert.Contains("settings changed", SettingsRehearsal.Prepare(tape, cancel: Cancel).Calibration.Why, StringComparison.Ordinal);
    }

    [Fact]
    public void Sketches_of_the_whole_vectors_give_nearly_the_same_scores()
    {
        // c23 is c01's problem with sketches of 256 rows instead of vectors.
        var rehearsal = SettingsRehearsal.Prepare(Tapes.Tape("c23"), cancel: Cancel);
        Assert.True(rehearsal.Calibration.Trusted, rehearsal.Calibration.Why);
    }

    [Fact]
    public void Several_fields_are_each_held_to_their_own_tolerance()
    {
        var tape = new RehearsalTape();
        foreach (var record in Recording.Of("c25").Records)
            tape.Observe(record is OpenRecord open ? open with { Fields = [.. open.Fields.Select(f => f with { Weight = 1 })] } : record);
        var rehearsal = SettingsRehearsal.Prepare(tape, cancel: Cancel);
        Assert.True(rehearsal.Calibration.Trusted, rehearsal.Calibration.Why);
        Assert.True(rehearsal.Calibration.Miss < 0.1, $"replayed {rehearsal.Calibration.Rehearsed}, recorded {rehearsal.Calibration.Recorded}");
    }

    [Fact]
    public void It_is_deterministic_and_leaves_the_tape_alone()
    {
        var tape = Tapes.Tape("c03");
        var steps = tape.Steps.ToArray();
        var first = SettingsRehearsal.Prepare(tape, cancel: Cancel).Run(Few, cancel: Cancel);
        var second = SettingsRehearsal.Prepare(tape, cancel: Cancel).Run(Few, cancel: Cancel);
        Assert.Equal(JsonSerializer.Serialize(first, WireJson.Options), JsonSerializer.Serialize(second, WireJson.Options));
        Assert.Equal(steps, tape.Steps);
    }

    [Fact]
    public void Progress_reaches_the_end_and_a_cancelled_search_stops()
    {
        var rehearsal = SettingsRehearsal.Prepare(Tapes.Tape("c01"), cancel: Cancel);
        var seen = new List<double>();
        rehearsal.Run(Few, new Recorder(seen.Add), Cancel);
        Assert.Equal([1 / 3.0, 2 / 3.0, 1], seen);
        using var stop = new CancellationTokenSource();
        seen.Clear();
        Assert.Throws<OperationCanceledException>(() => rehearsal.Run(Few, new Recorder(share =>
        {
            seen.Add(share);
            stop.Cancel();
        }), stop.Token));
        Assert.Single(seen);
    }

    [Fact]
    public void Settings_that_cannot_be_replayed_are_refused_by_name()
    {
        var rehearsal = SettingsRehearsal.Prepare(Tapes.Tape("c01"), cancel: Cancel);
        var error = Assert.Throws<ArgumentException>(() => rehearsal.Score(Tapes.Settings("c01") with { FilterThreshold = 2 }, Cancel));
        Assert.Contains("0 ≤ ε < 1", error.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void The_grid_never_goes_below_the_threshold_that_suits_the_noise_unless_the_run_does_already()
    {
        var inUse = Tapes.Settings("c01");
        Assert.All(CandidateGrid.For(inUse, 1e-6), c => Assert.True(c.FilterThreshold >= (c.FilterRule == FilterRule.OwnNorm ? 1e-4 : 1e-5)));
        Assert.Contains(CandidateGrid.For(inUse with { FilterThreshold = 1e-7 }, 1e-6), c => c is { FilterRule: FilterRule.OwnNorm, FilterThreshold: 1e-7, HistorySteps: 8 });
        Assert.DoesNotContain(CandidateGrid.For(inUse, 1e-6), c => c == inUse);
    }

    private sealed class Recorder(Action<double> take) : IProgress<double>
    {
        public void Report(double value) => take(value);
    }
}
