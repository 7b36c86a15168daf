using CouplingWatch.Coupling;
using CouplingWatch.Coupling.Start;
using CouplingWatch.Records;

namespace CoupledRuns;

/// <summary>
/// Steps a coupled problem in time, iterates every step until the interface agrees, sends what happens, and takes settings
/// revisions over between steps. One run, used once.
/// </summary>
public sealed class CoupledRun
{
    private readonly ICoupledProblem problem;
    private readonly RunPlan plan;
    private readonly IRunLink link;
    private readonly Pacing pacing;
    private readonly SteppedCoupling coupling;
    private readonly StartExtrapolation start;
    private readonly IterationRecords records;
    private readonly Queue<int> counts = [];
    private readonly double[] x, output, residual, next;
    private CouplingSettings settings;
    private double lastMagnitude;
    private int revision;

    /// <param name="problem">The two black boxes.</param>
    /// <param name="plan">How it is run.</param>
    /// <param name="link">Who watches.</param>
    /// <param name="clock">Paces the run.</param>
    public CoupledRun(ICoupledProblem problem, RunPlan plan, IRunLink link, TimeProvider clock)
    {
        ArgumentNullException.ThrowIfNull(problem);
        ArgumentNullException.ThrowIfNull(plan);
        ArgumentNullException.ThrowIfNull(link);
        ArgumentNullException.ThrowIfNull(clock);
        this.problem = problem;
        this.plan = plan;
        this.link = link;
        pacing = new Pacing(clock, plan.Pace);
        settings = plan.Settings;
        coupling = new SteppedCoupling(problem.Size, settings.Method(), surrogate: settings.Surrogate is { } name ? problem.Surrogate(name) : null);
        start = new StartExtrapolation(problem.Size);
        start.Accept(problem.Accepted);
        records = new IterationRecords(problem, plan);
        x = new double[problem.Size];
        output = new double[problem.Size];
        residual = new double[problem.Size];
        next = new double[problem.Size];
    }

    /// <summary>Settings in force.</summary>
    public CouplingSettings Settings => settings;

    /// <summary>Passes of every finished step, oldest first; at most the latest 4096.</summary>
    public IReadOnlyList<int> Counts => [.. counts];

    /// <summary>Finished steps so far.</summary>
    public int StepCount { get; private set; }

    /// <summary>The record this run opens with.</summary>
    public static OpenRecord Open(ICoupledProblem problem, RunPlan plan, DateTimeOffset? at = null)
    {
        ArgumentNullException.ThrowIfNull(problem);
        ArgumentNullException.ThrowIfNull(plan);
        return new OpenRecord
        {
            At = at,
            Campaign = plan.Campaign,
            Title = plan.Title,
            Solvers = problem.Solvers,
            Fields = [problem.Field],
            Settings = plan.Settings,
            Adjustable = plan.Adjustable,
            TimeStep = plan.TimeStep,
            EndTime = plan.Steps == int.MaxValue ? null : plan.TimeStep * plan.Steps,
            Nodes = plan.Nodes,
            AllocationEndsAt = at is { } opened && plan.AllocationHours is { } hours ? opened.AddHours(hours) : null,
            Labels = plan.Labels,
        };
    }

    /// <summary>Runs until the plan is done, the run diverges, it is told to stop, or <paramref name="stop"/> is cancelled; sends the closing record.</summary>
    public async Task<CloseOutcome> RunAsync(CancellationToken stop)
    {
        var unconverged = 0;
        for (var step = 0; step < plan.Steps; step++)
        {
            if (stop.IsCancellationRequested) return Close(CloseOutcome.Stopped, "asked to stop");
            if (await TakeOverAsync(step, stop) is { } told) return Close(CloseOutcome.Stopped, told);
            var timeStep = plan.TimeStep * (step >= plan.LaterFrom ? plan.LaterFactor : 1);
            StepOutcome outcome;
            try
            {
                outcome = await StepAsync(step, timeStep, stop);
            }
            catch (OperationCanceledException) when (stop.IsCancellationRequested)
            {
                return Close(CloseOutcome.Stopped, "asked to stop");
            }
            if (outcome == StepOutcome.Failed) return Close(CloseOutcome.Diverged, $"step {step} diverged");
            unconverged = outcome == StepOutcome.Converged ? 0 : unconverged + 1;
            if (unconverged >= plan.GiveUpAfter) return Close(CloseOutcome.Diverged, $"{unconverged} steps in a row did not converge");
        }
        return Close(CloseOutcome.Finished, null);
    }

    private async Task<StepOutcome> StepAsync(int step, double timeStep, CancellationToken stop)
    {
        problem.BeginStep(timeStep);
        coupling.BeginStep(step);
        start.Extrapolate(settings.PredictorOrder ?? 0, x);
        var cap = settings.IterationCap ?? int.MaxValue;
        var first = 0.0;
        for (var k = 0; ; k++)
        {
            problem.Pass(x, output);
            for (var i = 0; i < x.Length; i++) residual[i] = output[i] - x[i];
            var norms = new PassNorms(Norm(residual), Norm(output), problem.Field);
            if (k == 0) first = norms.Residual;
            var failed = !norms.Finite || norms.Residual > plan.GiveUpAt * Math.Max(first, lastMagnitude);
            var done = norms.Met;
            if (done || failed) coupling.Observe(residual, output);
            else coupling.Update(residual, output, next);
            link.Send(records.Iteration(step, k, problem.Time + timeStep, timeStep, norms, residual, output, done || failed ? null : coupling.Report));
            await pacing.WaitAsync(stop);
            if (failed) return End(step, k, timeStep, StepOutcome.Failed);
            if (done) return End(step, k, timeStep, StepOutcome.Converged);
            next.CopyTo(x, 0);
            if (k + 1 >= cap) return End(step, k, timeStep, StepOutcome.Capped);
        }
    }

    private StepOutcome End(int step, int lastIteration, double timeStep, StepOutcome outcome)
    {
        coupling.EndStep(lendColumns: outcome is StepOutcome.Converged or StepOutcome.Capped);
        if (outcome != StepOutcome.Failed)
        {
            var final = outcome == StepOutcome.Converged ? output : x;
            problem.Accept(final);
            start.Accept(final);
            lastMagnitude = Norm(final);
        }
        if (counts.Count == 4096) counts.Dequeue();
        counts.Enqueue(lastIteration + 1);
        StepCount++;
        link.Send(new StepRecord { Step = step, Iterations = lastIteration + 1, TimeStep = timeStep, Outcome = outcome });
        return outcome;
    }

    /// <summary>Takes a newer revision over, or refuses it, in either case with an <c>applied</c> record; returns why to stop, if told so.</summary>
    private async Task<string?> TakeOverAsync(int step, CancellationToken stop)
    {
        if (link.NewestRevision <= revision) return null;
        var published = await link.ReadSettingsAsync(stop);
        if (published is null || published.Revision <= revision) return null;
        revision = published.Revision;
        var refused = SettingsTakeover.Refusal(settings, published.Settings, published.Commands, plan.Adjustable);
        if (refused is not null)
        {
            link.Send(new AppliedRecord { Revision = revision, FromStep = step, Refused = refused });
            return null;
        }
        settings = settings.With(published.Settings);
        coupling.Change(settings.Method());
        if (published.Commands.Contains("dropHistory")) coupling.DropHistory();
        link.Send(new AppliedRecord { Revision = revision, FromStep = step, Settings = settings });
        return published.Commands.Contains("stop") ? $"stopped by revision {revision}" : null;
    }

    private CloseOutcome Close(CloseOutcome outcome, string? reason)
    {
        link.Send(new CloseRecord { Outcome = outcome, Reason = reason });
        return outcome;
    }

    private static double Norm(double[] vector)
    {
        var sum = 0.0;
        foreach (var value in vector) sum += value * value;
        return Math.Sqrt(sum);
    }
}
