using CouplingWatch.Monitoring;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Synthetic;

/// <summary>Runs that are not the plain case, written record by record.</summary>
public sealed class HandWrittenStreamTests
{
    private static readonly double[] Stalling = [.. Enumerable.Range(0, 14).Select(k => 1 + 0.2 * Math.Sin(2.5 * k))];

    [Fact]
    public void Alerts_inside_an_attempt_that_is_rejected_are_dropped()
    {
        var stream = new NormStream();
        for (var step = 0; step < 6; step++)
        {
            if (step % 2 == 1) stream.Iterations(step, Stalling, attempt: 0).Verdict(step, StepOutcome.Rejected, 0);
            stream.Iterations(step, NormStream.Falling(1, 0.01, 5), attempt: step % 2).Verdict(step, attempt: step % 2);
        }
        var monitor = stream.Judge();
        Assert.Empty(monitor.Alerts);
        Assert.Equal(6, monitor.StepCount);
        Assert.Equal(3, monitor.State.AttemptsRejected);
        Assert.Equal(42, monitor.State.IterationsRejected);
    }

    [Fact]
    public void They_are_shown_once_the_attempt_is_taken()
    {
        var stream = new NormStream().Iterations(0, Stalling, attempt: 0);
        Assert.Empty(stream.Judge().Alerts);
        var alert = Assert.Single(stream.Verdict(0, StepOutcome.Converged, 0).Judge().Alerts, a => a.Check == "stall");
        Assert.Equal(9, alert.Seq);
    }

    [Fact]
    public void A_code_that_rejects_without_sending_attempts_closes_what_was_shown_and_holds_from_then_on()
    {
        var stream = new NormStream().Iterations(0, Stalling).Verdict(0, StepOutcome.Rejected).Healthy(0)
            .Iterations(1, Stalling).Verdict(1, StepOutcome.Rejected).Healthy(1);
        var alert = Assert.Single(stream.Judge().Alerts);
        Assert.Equal(15, alert.ClosedSeq);
    }

    [Fact]
    public void Not_a_number_is_told_at_once_even_inside_an_attempt()
    {
        var monitor = new NormStream().Iterations(0, [1, 0.1, double.NaN], attempt: 0).Judge();
        Assert.Equal(3, Assert.Single(monitor.Alerts).Seq);
    }

    [Fact]
    public void A_first_residual_that_is_not_a_number_is_a_divergence()
    {
        var alert = Assert.Single(new NormStream().Iterations(0, [double.NaN, double.NaN, 1]).Judge().Alerts);
        Assert.Equal(("divergence", 1L, Severity.Critical), (alert.Check, alert.Seq, alert.Severity));
    }

    [Fact]
    public void A_recording_that_just_ends_is_silent_at_its_last_record()
    {
        var stream = new NormStream().Healthy(0).Healthy(1);
        Assert.Empty(stream.Judge().Alerts);
        var alert = Assert.Single(stream.Judge(end: true).Alerts);
        Assert.Equal(("silent", stream.NextSeq - 1), (alert.Check, alert.Seq));
        Assert.Empty(stream.Add(new CloseRecord { Outcome = CloseOutcome.Finished }).Judge(end: true).Alerts);
    }

    [Fact]
    public void A_record_that_comes_far_too_late_is_told_and_a_checkpoint_is_no_silence()
    {
        var stream = new NormStream().Healthy(0).Healthy(1).Wait(95).Add(new CheckpointRecord { Step = 1, Seconds = 94 }).Healthy(2);
        Assert.Empty(stream.Judge().Alerts);
        var late = stream.Wait(95).Healthy(3).Judge();
        Assert.Equal("silent", Assert.Single(late.Alerts).Check);
    }

    [Fact]
    public void A_beat_in_a_recording_tells_a_hang()
    {
        var stream = new NormStream().Healthy(0).Add(new BeatRecord { In = "water", InsideSeconds = 599 });
        Assert.Empty(stream.Judge().Alerts);
        var alert = Assert.Single(stream.Add(new BeatRecord { In = "water", InsideSeconds = 2460 }).Judge().Alerts);
        Assert.Equal(("hang", Severity.Critical), (alert.Check, alert.Severity));
        Assert.Contains("water", alert.Text, StringComparison.Ordinal);
    }

    [Fact]
    public void An_alert_closes_after_three_converged_steps_without_it_and_a_recurrence_is_a_new_one()
    {
        var stream = new NormStream().Healthy(0).Iterations(1, NormStream.Falling(1, 0.5, 5)).Verdict(1, StepOutcome.Capped);
        for (var step = 2; step < 5; step++) stream.Healthy(step);
        var first = Assert.Single(stream.Judge().Alerts);
        Assert.Equal((AlertState.Returned, stream.NextSeq - 1), (first.State, first.ClosedSeq!.Value));
        stream.Iterations(5, NormStream.Falling(1, 0.5, 5)).Verdict(5, StepOutcome.Capped);
        Assert.Equal([AlertState.Closed, AlertState.Unacknowledged], stream.Judge().Alerts.Select(a => a.State));
    }

    [Fact]
    public void Two_unconverged_steps_in_a_row_are_one_critical_matter()
    {
        var stream = new NormStream();
        for (var step = 0; step < 2; step++) stream.Iterations(step, NormStream.Falling(1, 0.5, 5)).Verdict(step, StepOutcome.Capped);
        var alerts = stream.Judge().Alerts;
        var whole = Assert.Single(alerts, a => a.Check == "unconverged-run");
        Assert.Equal(Severity.Critical, whole.Severity);
        Assert.Equal(whole.Id, alerts.Single(a => a.Check == "capped").Cause);
    }

    [Fact]
    public void A_change_of_the_time_step_starts_a_hold_off_and_small_changes_do_not()
    {
        var stream = new NormStream();
        for (var step = 0; step < 6; step++) stream.Healthy(step, timeStep: 0.01 * (1 + 0.02 * step));
        Assert.False(stream.Judge().State.Learning.Holds);
        var state = stream.Healthy(6, timeStep: 0.05).Judge().State;
        Assert.True(state.Learning.Holds);
        Assert.Equal("time-step", state.Learning.Since);
    }

    [Fact]
    public void A_steady_run_is_judged_in_windows_and_closes_alerts_after_clean_iterations()
    {
        var stream = new NormStream(change: o => o with { Stepping = Stepping.Steady, Settings = new CouplingSettings { Method = CouplingMethod.IqnIls } });
        stream.Iterations(0, Stalling);
        var alert = Assert.Single(stream.Judge().Alerts);
        Assert.Equal("stall", alert.Check);
        stream.Iterations(0, NormStream.Falling(0.5, 0.7, 40), from: Stalling.Length);
        Assert.NotNull(Assert.Single(stream.Judge().Alerts).ClosedSeq);
    }

    [Fact]
    public void A_step_that_records_are_missing_from_lends_no_path_and_claims_nothing()
    {
        var stream = new NormStream().Healthy(0).Iterations(1, [1, 0.1]).Add(new SkippedRecord { Iterations = 3 }).Verdict(1);
        var monitor = stream.Judge();
        Assert.Equal(1, monitor.State.Paths.Count);
        Assert.Empty(monitor.Alerts);
    }

    [Fact]
    public void Applied_settings_start_the_comparison_anew()
    {
        var stream = new NormStream();
        for (var step = 0; step < 6; step++) stream.Healthy(step);
        stream.Add(new AppliedRecord { Revision = 1, FromStep = 7, Settings = new CouplingSettings { Method = CouplingMethod.IqnIls, IterationCap = 40, HistorySteps = 8 } });
        Assert.Equal(4, stream.Judge().State.Settings.HistorySteps);
        stream.Healthy(6);
        Assert.Equal(4, stream.Judge().State.Settings.HistorySteps);
        var state = stream.Healthy(7).Judge().State;
        Assert.Equal(8, state.Settings.HistorySteps);
        Assert.Equal("applied", state.Learning.Since);
        Assert.Equal(1, state.Paths.Count);
    }

    [Fact]
    public void A_need_that_stays_flat_while_magnitude_grows_does_not_hide_a_divergence()
    {
        var stream = new NormStream();
        for (var k = 0; k < 12; k++)
        {
            var norm = Math.Pow(10, 0.4 * k);
            stream.Add(new IterationRecord { Step = 0, Iteration = k, Residuals = NamedValues.Of(("level", norm)), Magnitudes = NamedValues.Of(("level", norm)) });
        }
        Assert.Contains(stream.Judge().Alerts, a => a.Check == "divergence" && a.Iteration == 4);
    }
}
