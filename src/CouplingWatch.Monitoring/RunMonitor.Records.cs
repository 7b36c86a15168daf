using System.Globalization;
using CouplingWatch.Monitoring.Alerts;
using CouplingWatch.Monitoring.Checks;
using CouplingWatch.Monitoring.Checks.Hang;
using CouplingWatch.Monitoring.Checks.Silent;
using CouplingWatch.Monitoring.Forecast;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring;

public sealed partial class RunMonitor
{
    /// <summary>Handles the next record. The returned list is reused by the next call.</summary>
    /// <param name="record">A record of this run; one with a seq that was handled before is ignored.</param>
    /// <param name="received">When the server received it; used where the record carries no time.</param>
    public IReadOnlyList<Change> Observe(StreamRecord record, DateTimeOffset received)
    {
        ArgumentNullException.ThrowIfNull(record);
        changes.Clear();
        if (record.Seq >= 0)
        {
            if (record.Seq < state.NextSeq) return changes;
            if (record.Seq > state.NextSeq) RecordsMissing();
            state.NextSeq = record.Seq + 1;
            state.Seq = record.Seq;
        }
        state.At = record.At ?? received;
        AlertEvents.EndShelving(alerts, received, changes);
        findings.Clear();
        state.Notes.Clear();
        foreach (var listener in listeners) listener.Record(state, record);
        var gap = record.Seq >= 0 ? state.Cadence.Observe(record is OpenRecord ? null : record.At, received, (record as CheckpointRecord)?.Seconds ?? 0) : null;
        if (record is IterationRecord iteration) OnIteration(iteration, gap);
        else
        {
            if (gap is { } seconds) ReportSilence(seconds);
            OnOther(record);
        }
        return changes;
    }

    private void OnOther(StreamRecord record)
    {
        switch (record)
        {
            case OpenRecord open: OnOpen(open); break;
            case StepRecord step: OnStep(step); break;
            case AppliedRecord applied: OnApplied(applied); break;
            case ResizeRecord resize: OnResize(resize); break;
            case SkippedRecord: RecordsMissing(); break;
            case BeatRecord beat:
                state.BeatsSeen = true;
                if (HangCheck.Of(state, beat) is { } hang) findings.Add(hang);
                Report();
                break;
            case CheckpointRecord checkpoint: state.Checkpoint = checkpoint; break;
            case CloseRecord close:
                CloseLast();
                EndRace("the run ended");
                state.Close = close;
                changes.Add(new Change(ChangeKind.Close));
                changes.Add(new Change(ChangeKind.Verdict));
                break;
        }
    }

    private void OnOpen(OpenRecord open)
    {
        if (state.Open is not null) return;
        state.Open = open;
        state.Settings = open.Settings;
        state.TimeStep = open.TimeStep;
        state.Fields.Declare(open.Fields);
        settings.Open(open);
        if (string.Equals(open.Continues?.Basis, "kept", StringComparison.Ordinal))
        {
            state.Learning.Skip();
            state.Basis.ForeignSteps = Math.Max(1, state.HistorySteps);
        }
        else if (open.Continues is not null) state.Learning.Restart("restart");
    }

    private void OnIteration(IterationRecord record, double? gap)
    {
        var step = state.Step;
        var attempt = record.Attempt ?? 0;
        if (record.Attempt is not null) state.SendsAttempts = true;
        if (step.InProgress && (record.Step != step.Step || attempt != step.Attempt || record.Iteration <= step.Iteration)) CloseUnsaid(record);
        if (!step.InProgress) Begin(record, attempt);
        Take(record);
        if (gap is { } seconds) findings.Add(SilentCheck.Late(seconds, state.Cadence.LimitSeconds));
        foreach (var check in checks) check.Iteration(state, findings);
        foreach (var listener in listeners) listener.Iteration(state);
        if (state.Steady) alerts.SteadyIteration(findings, state.Seq, changes);
        Report();
        changes.Add(new Change(ChangeKind.Iteration));
        RenewAdvice(false);
    }

    private void Begin(IterationRecord record, int attempt)
    {
        if (settings.Pending is { } pending && (pending.FromStep ?? record.Step) <= record.Step) PutInForce(pending, record.Step);
        state.Step.Begin(record.Step, attempt, record.Seq);
        state.Fields.BeginStep();
        state.Basis.BeginStep();
        state.Traces.Begin(record.Step, attempt, state.Fields.All.Count);
        state.Remaining = null;
        state.Misled = false;
        ObserveTimeStep(record.TimeStep);
    }

    private void Take(IterationRecord record)
    {
        var step = state.Step;
        var fields = state.Fields;
        if (state.Steady && settings.Pending is { } pending && (pending.FromIteration ?? record.Iteration) <= record.Iteration) PutInForce(pending, record.Step);
        races.Pass(record, step.Received == 0);
        state.Iterations++;
        state.Level = Math.Max(state.Level, record.Vectors is not null || record.Sketch is not null ? 3 : record.Basis is not null ? 2 : record.Magnitudes is not null ? 1 : 0);
        state.Times.Observe(record, state.Parallel);
        if (record.Relaxation is { } relaxation && double.IsFinite(relaxation)) state.RelaxationSent = relaxation;
        if (record.Time is { } time) step.Time = time;
        if (record.TimeStep is { } timeStep) step.TimeStep = timeStep;
        fields.Observe(record);
        step.Add(record.Iteration, fields.Norm, fields.Need, Done(record, fields.Need), fields.NotFinite);
        state.Basis.Observe(state, record);
        if (!double.IsNaN(state.Basis.Cosine)) step.Cosines.Add(state.Basis.Cosine);
        state.Remaining = StepForecaster.Foretell(step, state.Paths);
        var rate = step.Z.Count < 2 ? double.NaN : Math.Pow(10, Robust.Slope(step.Z, StepForecaster.RateWindow).Slope);
        state.Trace.Add(new TraceRow(record.Iteration, record.Seq, fields.Norm, step.Z[0], fields.Need ?? double.NaN, rate, state.Remaining?.Iterations ?? double.NaN,
            record.Relaxation ?? double.NaN, step.Done), fields);
    }

    /// <summary>The code's own word where it gives one, else need ≤ 1e-9.</summary>
    private static bool Done(IterationRecord record, double? need)
    {
        if (record.Met is not { Count: > 0 } met) return need <= 1e-9;
        foreach (var value in met.Values)
            if (value != 1) return false;
        return true;
    }

    private void OnStep(StepRecord record)
    {
        if (record.Attempt is not null) state.SendsAttempts = true;
        state.SendsStepRecords = true;
        var step = state.Step;
        if (!step.InProgress || record.Step != step.Step || (record.Attempt ?? step.Attempt) != step.Attempt) return;
        if (record.TimeStep is { } timeStep) step.TimeStep = timeStep;
        Close(record.Outcome, record.Iterations ?? step.Iteration + 1);
    }

    /// <summary>The next iteration belongs to another step or attempt and no verdict was sent.</summary>
    private void CloseUnsaid(IterationRecord next)
    {
        var step = state.Step;
        if (next.Step <= step.Step)
        {
            Close(StepOutcome.Rejected, step.Iteration + 1);
            return;
        }
        var cap = state.Settings.IterationCap;
        var atCap = step.Iteration + 1 >= cap;
        var declared = state.Fields.Governing is { Inferred: false };
        var converged = step.Done || (!atCap && !declared);
        Close(converged ? StepOutcome.Converged : StepOutcome.Capped, step.Iteration + 1);
    }

    /// <summary>A code that sends no verdicts closes its last step by closing the run: converged if done, capped at the cap; unfinished otherwise.</summary>
    private void CloseLast()
    {
        var step = state.Step;
        if (!step.InProgress || state.SendsStepRecords) return;
        if (step.Done) Close(StepOutcome.Converged, step.Iteration + 1);
        else if (step.Iteration + 1 >= state.Settings.IterationCap) Close(StepOutcome.Capped, step.Iteration + 1);
    }

    private void Close(StepOutcome outcome, int iterations)
    {
        var step = state.Step;
        findings.Clear();
        var closed = new ClosedStep(step.Step, step.Attempt, step.Ordinal, outcome, iterations, step.Need, state.Fields.Norm,
            !step.Incomplete && !step.HasNotFinite, step.Time, step.TimeStep, step.FirstSeq, state.Seq, state.At, state.Revision);
        state.Account(closed);
        state.Basis.StepClosed(state, closed);
        var rejected = outcome == StepOutcome.Rejected;
        if (rejected) state.SendsAttempts = true;
        alerts.Settle(rejected, step.Ordinal, state.Seq, changes);
        var onTrial = races.OnTrial(closed.Revision);
        if (onTrial && closed.Outcome == StepOutcome.Failed)
        {
            foreach (var check in checks.Where(c => c.Id == CheckIds.Divergence)) check.StepClosed(state, closed, findings);
            Report();
        }
        if (!rejected && !onTrial)
        {
            foreach (var check in checks) check.StepClosed(state, closed, findings);
            state.Remember(closed);
            settings.StepDone(iterations);
            Report();
            if (closed.Converged) alerts.StepConverged(step.Ordinal, state.Seq, changes);
            state.Learning.StepDone();
        }
        foreach (var listener in listeners) listener.StepClosed(state, closed);
        RaceStepClosed(closed);
        findings.Clear();
        RenewAdvice(true);
        changes.Add(new Change(ChangeKind.Step));
        changes.Add(new Change(ChangeKind.Verdict));
    }

    private void OnApplied(AppliedRecord record)
    {
        settings.Applied(record);
        OnRaceRefused(record);
        changes.Add(new Change(ChangeKind.Settings, record.Revision.ToString(CultureInfo.InvariantCulture)));
        if (record.Settings is null || state.Steady || !state.Step.InProgress || record.FromStep > state.Step.Step) return;
        PutInForce(record, state.Step.Step);
    }

    private void PutInForce(AppliedRecord record, int fromStep)
    {
        var changed = SettingsBook.Differences(state.Settings, record.Settings!).Count > 0;
        settings.InForce(record.Revision, Mean(state.Counts), state.Counts.Count);
        state.Settings = record.Settings!;
        state.Revision = record.Revision;
        state.RelaxationSent = null;
        if (settings.Drops(record.Revision)) state.Basis.DropHistory();
        foreach (var listener in listeners) listener.SettingsInForce(state, fromStep);
        var ofRace = races.GoesOn && races.Owns(record.Revision);
        races.SettingsInForce(record);
        if (changed && (!ofRace || WinnerInForce(record.Revision))) Restart("applied", RestartCause.Settings);
    }

    private void OnResize(ResizeRecord record)
    {
        state.Fields.Declare(record.Fields);
        if (state.Step.InProgress) state.Step.Incomplete = true;
        state.Basis.Resize(state, record.BasisMapped);
        EndRace("the interface changed its size");
        Restart("resize", RestartCause.Resize);
    }

    /// <summary>Time steps that change by more than a quarter start a hold-off; adaptive stepping changes them by less from step to step.</summary>
    private void ObserveTimeStep(double? timeStep)
    {
        if (timeStep is not { } now || !(now > 0)) return;
        var before = state.TimeStep;
        if (before is { } reference && now / reference is >= 0.8 and <= 1.25) return;
        state.TimeStep = now;
        if (before is null || state.StepsComplete == 0) return;
        state.Learning.Restart("time-step");
        foreach (var check in checks) check.Restart(state, RestartCause.TimeStep);
    }

    private void Restart(string since, RestartCause cause)
    {
        state.Learning.Restart(since);
        state.ForgetHistory();
        alerts.SettingsChanged();
        advice.SettingsChanged(state.Seq);
        foreach (var check in checks) check.Restart(state, cause);
    }

    private void RecordsMissing()
    {
        if (state.Step.InProgress) state.Step.Incomplete = true;
    }

    private void ReportSilence(double seconds)
    {
        findings.Add(SilentCheck.Late(seconds, state.Cadence.LimitSeconds));
        Report();
    }

    private void Report()
    {
        if (findings.Count == 0) return;
        var step = state.Step;
        var place = new Place(step.Step, step.Iteration, state.Seq, state.At, step.Ordinal);
        var held = state.SendsAttempts && step.InProgress;
        foreach (var finding in findings)
        {
            if (finding.Check is CheckIds.NoiseFloor or CheckIds.Polluted) state.Basis.Taint(step.Ordinal);
            if (GoesToRaceLog(finding)) continue;
            alerts.Report(finding, place, held, changes);
        }
        alerts.Relate(step.Ordinal);
        findings.Clear();
    }

    /// <summary>Advice follows the alerts; a step may bring the standing one.</summary>
    private void RenewAdvice(bool stepClosed)
    {
        if (!stepClosed && !changes.Exists(c => c.Kind == ChangeKind.Alert)) return;
        if (state.Ended) return;
        advice.Renew(state, alerts, checks, changes);
    }

    private static double Mean(Window counts)
    {
        var sum = 0.0;
        for (var i = 0; i < counts.Count; i++) sum += counts[i];
        return counts.Count == 0 ? 0 : sum / counts.Count;
    }
}
