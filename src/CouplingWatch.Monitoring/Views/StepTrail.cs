using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>What the pages show of the latest steps: which field governed, how the basis was conditioned, how long the steps took by the wall clock.</summary>
internal sealed class StepTrail : IRunListener
{
    /// <summary>Steps kept.</summary>
    public const int Kept = 60;

    private readonly Queue<GoverningStep> governing = new();
    private readonly Queue<ConditionPoint> condition = new();
    private bool senderHasClock;

    public IReadOnlyCollection<GoverningStep> Governing => governing;

    public IReadOnlyCollection<ConditionPoint> Condition => condition;

    /// <summary>Wall seconds from the end of one step to the end of the next.</summary>
    public Window StepSeconds { get; } = new(Kept);

    /// <summary>The latest record that reported where the residual is worst.</summary>
    public IReadOnlyList<WorstResidual> Worst { get; private set; } = [];

    /// <summary>The latest reported basis of a run that sends no vectors.</summary>
    public (int Step, int Iteration, BasisReport Report)? Reported { get; private set; }

    /// <summary>Iterations in steps that did not converge.</summary>
    public long IterationsUnconverged { get; private set; }

    /// <summary>Time of the first and of the latest record, and of the last closed step: by the sender's clock where it has one, else by receipt.</summary>
    public DateTimeOffset? OpenedAt { get; private set; }

    public DateTimeOffset? LatestAt { get; private set; }

    public DateTimeOffset? LastClosedAt { get; private set; }

    public void Record(RunState run, StreamRecord record)
    {
        if (record.At is not null && !senderHasClock)
        {
            senderHasClock = true;
            OpenedAt = null;
        }
        if (!senderHasClock || record.At is not null)
        {
            LatestAt = run.At;
            OpenedAt ??= run.At;
        }
        if (record is not IterationRecord iteration) return;
        Worst = iteration.Worst;
        if (iteration.Basis is { } report) Reported = (iteration.Step, iteration.Iteration, report);
    }

    public void StepClosed(RunState run, in ClosedStep step)
    {
        if (LatestAt is { } at)
        {
            if (LastClosedAt is { } before && at > before) StepSeconds.Add((at - before).TotalSeconds);
            LastClosedAt = at;
        }
        if (step.Outcome == StepOutcome.Rejected) return;
        if (step.Unconverged) IterationsUnconverged += step.Iterations;
        NoteGoverning(run, step.Step);
        if (ConditionReader.Now(run, Reported) is { } point) Push(condition, point);
    }

    private void NoteGoverning(RunState run, int step)
    {
        FieldState? last = null;
        var second = 0;
        foreach (var field in run.Fields.All)
        {
            if (last is null || field.Late > last.Late)
            {
                second = last?.Late ?? 0;
                last = field;
            }
            else second = Math.Max(second, field.Late);
        }
        if (last is not null && run.Fields.All.Count > 1) Push(governing, new GoverningStep(step, last.Name, last.Late - second));
    }

    private static void Push<T>(Queue<T> queue, T item)
    {
        queue.Enqueue(item);
        if (queue.Count > Kept) queue.Dequeue();
    }
}
