using CoupledRuns;
using CouplingWatch.Monitoring.Race;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Sweeps;

/// <summary>A change of settings before a step.</summary>
internal sealed record Change(int Step, CouplingSettings Settings, IReadOnlyList<string> Commands);

/// <summary>The line of a coupled run to a race: feeds it complete steps, hands its wishes back before the next step. No server, no clock.</summary>
internal sealed class RacedRun : IRunLink
{
    private readonly Queue<Change> script;
    private readonly CancellationTokenSource end = new();
    private readonly List<RaceStep> before = [];
    private readonly int steps;
    private int revision;
    private int inForce;
    private SettingsRevision? newest;

    private RacedRun(int steps, IEnumerable<Change> script)
    {
        this.steps = steps;
        this.script = new Queue<Change>(script);
    }

    public List<RaceStep> Steps { get; } = [];

    public List<Change> Changes { get; } = [];

    public GuardedRace? Race { get; private set; }

    public CloseOutcome Outcome { get; private set; }

    /// <summary>Steps a race had seen when its verdict fell; null when it did not fall.</summary>
    public int? DecidedAt { get; private set; }

    public int NewestRevision => revision;

    /// <summary>Runs <paramref name="steps"/> steps, changing settings as the script says.</summary>
    public static RacedRun Scripted(Variant variant, CouplingSettings settings, int steps, IEnumerable<Change> script)
    {
        var run = new RacedRun(steps, script);
        run.Go(variant, settings);
        return run;
    }

    /// <summary>Runs a race after twelve steps, and <paramref name="after"/> steps more once it is decided.</summary>
    public static RacedRun Raced(Variant variant, CouplingSettings settings, Func<IReadOnlyList<RaceStep>, GuardedRace> start, int waitFor, int after, int most = 400)
    {
        var run = new RacedRun(most, []) { starter = start, waitFor = waitFor, after = after };
        run.Go(variant, settings);
        return run;
    }

    private Func<IReadOnlyList<RaceStep>, GuardedRace>? starter;
    private int waitFor;
    private int after;

    private void Go(Variant variant, CouplingSettings settings)
    {
        var plan = new RunPlan
        {
            Campaign = "sweep",
            Title = variant.Name,
            Settings = settings,
            TimeStep = variant.TimeStep,
            LaterFactor = variant.LaterFactor,
            LaterFrom = variant.LaterFrom,
            Adjustable = Starts.Adjustable,
            SendVectors = false,
        };
        Next(0);
        Outcome = new CoupledRun(variant.Make(), plan, this, TimeProvider.System).RunAsync(end.Token).GetAwaiter().GetResult();
    }

    public void Send(StreamRecord record)
    {
        switch (record)
        {
            case AppliedRecord applied:
                inForce = applied.Refused is null ? applied.Revision : inForce;
                if (applied.Refused is { } why) Race?.Refused(applied.Revision, why);
                else Race?.Applied(applied.Revision, applied.Settings);
                break;
            case StepRecord step:
                Take(new RaceStep(step.Step, step.Iterations ?? 0, step.Outcome, null, inForce));
                break;
        }
    }

    public Task<SettingsRevision?> ReadSettingsAsync(CancellationToken stop) => Task.FromResult(newest);

    private void Take(RaceStep step)
    {
        Steps.Add(step);
        if (starter is not null && Race is null)
        {
            before.Add(step);
            if (before.Count == waitFor) Race = starter(before);
        }
        else
        {
            Race?.Observe(step);
        }
        if (DecidedAt is null && Race is { State: not (RaceState.Waiting or RaceState.Running) }) DecidedAt = Steps.Count;
        if (Steps.Count >= steps || Steps.Count >= DecidedAt + after) end.Cancel();
        Next(Steps.Count);
    }

    private void Next(int step)
    {
        if (Race?.Wish is { } wish)
        {
            Publish(new Change(step, wish.Settings, wish.Commands));
            Race.Published(revision, wish.Arm);
        }
        while (script.TryPeek(out var change) && change.Step <= step) Publish(script.Dequeue());
    }

    private void Publish(Change change)
    {
        revision++;
        newest = new SettingsRevision { Revision = revision, Settings = change.Settings, Commands = change.Commands };
        Changes.Add(change);
    }
}
