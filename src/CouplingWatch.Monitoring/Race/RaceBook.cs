using CouplingWatch.Monitoring.State;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Race;

/// <summary>The races of one run: the one that goes on, the ones before, and the latest steps a new one would start from.</summary>
internal sealed class RaceBook(string run)
{
    private const int StepsKept = 24;
    private const int RacesKept = 50;

    private readonly List<RaceStep> recent = [];
    private readonly List<RaceView> before = [];
    private double? seconds;

    public GuardedRace? Current { get; private set; }

    /// <summary>All races, oldest first; the last one may still go on.</summary>
    public IReadOnlyList<RaceView> All => Current is { } current ? [.. before, current.View()] : before;

    public int Started { get; private set; }

    public bool GoesOn => Current is { IsOver: false };

    /// <summary>Latest complete steps under the settings in force.</summary>
    public IReadOnlyList<RaceStep> Recent => recent;

    /// <summary>A challenger's trial: its steps enter no baseline, and what they raise is no alert.</summary>
    public bool OnTrial(int revision) => Current is { State: RaceState.Running } race && race.ArmOf(revision) > 0;

    /// <summary>The revision was published by the race that goes on, or by the latest one.</summary>
    public bool Owns(int revision) => revision > 0 && Current?.ArmOf(revision) is not null;

    public void Start(RaceStartedEvent e, RunState state)
    {
        if (Current is { } last)
        {
            before.Add(last.View());
            if (before.Count > RacesKept) before.RemoveAt(0);
        }
        Started++;
        Current = new GuardedRace(new RaceSetup
        {
            Id = e.Race,
            Run = run,
            By = e.By,
            Reason = e.Reason,
            StartedAt = e.At,
            Seed = e.Seed,
            ScoreBy = e.ScoreBy,
            InUse = state.Settings,
            Revision = state.Revision,
            Challengers = e.Challengers,
            Cap = state.Settings.IterationCap,
            MayDropHistory = state.Open?.Adjustable.Commands.Contains("dropHistory") ?? false,
            Before = [.. recent],
        });
    }

    /// <summary>A pass was made.</summary>
    public void Pass(IterationRecord record, bool first)
    {
        if (first) seconds = 0;
        seconds += record.PassSeconds ?? Sum(record.Seconds);
    }

    private static double? Sum(NamedValues? values)
    {
        if (values is null) return null;
        var sum = 0.0;
        foreach (var value in values.Values) sum += value;
        return sum;
    }

    /// <summary>A step or an attempt has its verdict.</summary>
    public void StepClosed(in ClosedStep closed)
    {
        var step = new RaceStep(closed.Step, closed.Iterations, closed.Outcome, seconds is { } s && double.IsFinite(s) && s > 0 ? s : null, closed.Revision, closed.Complete);
        if (Current is { IsOver: false } race) race.Observe(step);
        if (closed.Outcome is not (StepOutcome.Converged or StepOutcome.Capped)) return;
        recent.Add(step);
        if (recent.Count > StepsKept) recent.RemoveAt(0);
    }

    /// <summary>Another set of settings is in force: earlier steps say nothing about it.</summary>
    public void SettingsInForce(AppliedRecord applied)
    {
        recent.Clear();
        if (Current is { IsOver: false } race) race.Applied(applied.Revision, applied.Settings);
    }
}
