using System.Globalization;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Race;

/// <summary>
/// A guarded live trial: the settings in use (arm 0) and up to six challengers take turns in short blocks on the running problem, the
/// order drawn anew each round, until one is clearly better or none is. A pure machine: steps and revisions in, wishes out
/// (<see cref="Wish"/>); the same calls give the same race, so it is replayed from the journal. Not safe for concurrent use.
/// </summary>
public sealed partial class GuardedRace
{
    private readonly RaceSetup setup;
    private readonly RaceOptions options;
    private readonly List<ArmState> arms = [];
    private readonly List<RaceStep> before = [];
    private readonly Dictionary<int, int> armOfRevision = [];
    private readonly List<int[]> orders = [];
    private readonly List<(int Round, RaceBlock Block)> blocks = [];
    private readonly List<RunStep> steps = [];
    private readonly List<RaceLogEntry> log = [];
    private RaceBaseline? baseline;
    private int round;
    private int place;
    private Block block;
    private bool recovering;
    private bool spoilt;
    private int wanted;
    private int published;
    private int? inForce = 0;
    private int waited;
    private string reason = "";

    /// <param name="setup">At most as many challengers as the options allow; each differs from the settings in use.</param>
    /// <exception cref="ArgumentException">A challenger equals the settings in use, or there are too many.</exception>
    public GuardedRace(RaceSetup setup, RaceOptions? options = null)
    {
        ArgumentNullException.ThrowIfNull(setup);
        this.setup = setup;
        this.options = (options ?? new RaceOptions()).Checked();
        if (setup.Challengers.Count > this.options.Challengers)
            throw new ArgumentOutOfRangeException(nameof(setup), setup.Challengers.Count, $"a race takes at most {this.options.Challengers} challengers");
        arms.Add(new ArmState(0, setup.InUse, "in use", "in-use"));
        foreach (var challenger in setup.Challengers)
        {
            if (SettingsDifference.AreSame(setup.InUse, challenger.Settings))
                throw new ArgumentException($"challenger {arms.Count} equals the settings in use", nameof(setup));
            arms.Add(new ArmState(arms.Count, challenger.Settings, SettingsDifference.Describe(setup.InUse, challenger.Settings), challenger.Origin));
        }
        armOfRevision[setup.Revision] = 0;
        Say(null, "start", arms.Count == 1 ? "No challenger: nothing to compare." : $"Race of the settings in use against {arms.Count - 1} challenger{(arms.Count == 2 ? "" : "s")}, seed {setup.Seed}.");
        if (arms.Count == 1)
        {
            Finish("nothing-compared", "No challenger could take part: nothing was compared.", null);
            return;
        }
        foreach (var step in setup.Before)
            if (Counts(step)) before.Add(step);
        BeginWhenReady();
    }

    public string Id => setup.Id;

    public RaceState State { get; private set; } = RaceState.Waiting;

    public bool IsOver => State is RaceState.Finished or RaceState.Stopped;

    /// <summary>The revision to publish now; null when the newest published one is what the race wants.</summary>
    public RaceWish? Wish { get; private set; }

    /// <summary>A complete step, or a rejected attempt, in the order of the stream. Ignored once the race is over.</summary>
    public void Observe(in RaceStep step)
    {
        if (IsOver) return;
        if (!armOfRevision.TryGetValue(step.Revision, out var arm))
        {
            Stop(null, $"revision {step.Revision} is in force, which this race did not publish");
            return;
        }
        inForce = arm;
        if (State == RaceState.Waiting)
        {
            if (!Counts(step)) return;
            before.Add(step);
            BeginWhenReady();
            return;
        }
        var state = arms[arm];
        state.StepsRun++;
        if (!step.Converged) state.CappedSteps++;
        if (State == RaceState.Watching) Watch(step, arm);
        else Run(step, state);
    }

    /// <summary>A revision of this race was published. Clears the wish it answers.</summary>
    /// <param name="arm">Whose settings it carries.</param>
    public void Published(int revision, int arm)
    {
        if (arm < 0 || arm >= arms.Count) throw new ArgumentOutOfRangeException(nameof(arm), arm, $"must lie in 0…{arms.Count - 1}");
        armOfRevision[revision] = arm;
        published = arm;
        waited = 0;
        if (Wish is { } wish && wish.Arm == arm) Wish = null;
    }

    /// <summary>The run took a revision over.</summary>
    /// <param name="settings">The complete settings in force as the run says; null when it does not say.</param>
    public void Applied(int revision, CouplingSettings? settings)
    {
        if (IsOver) return;
        if (!armOfRevision.TryGetValue(revision, out var arm))
        {
            Stop(null, $"revision {revision} is in force, which this race did not publish");
            return;
        }
        inForce = arm;
        if (arm == 0 || settings is null || !arms[arm].In) return;
        var asked = SettingsDifference.Between(setup.InUse, arms[arm].Settings).Select(c => c.Setting).ToHashSet();
        var other = SettingsDifference.Between(arms[arm].Settings, settings).FirstOrDefault(c => asked.Contains(c.Setting) && c.To != SettingsDifference.Undeclared);
        if (other is null) return;
        Remove(arms[arm], null, $"the run applied {other.Setting} {other.To} instead of {other.From}");
    }

    /// <summary>The run refused a revision.</summary>
    public void Refused(int revision, string why)
    {
        ArgumentNullException.ThrowIfNull(why);
        if (IsOver || !armOfRevision.TryGetValue(revision, out var arm)) return;
        published = inForce ?? 0;
        Say(null, "refused", $"The run refused {arms[arm].Name}: {why}", arm);
        if (arm == 0)
        {
            Stop(null, $"the run refused to go back to the settings it had: {why}");
        }
        else if (State == RaceState.Watching)
        {
            wanted = 0;
            Finish("keep", $"The run refused the winner: {why}. The settings in use stay.", null);
        }
        else
        {
            Remove(arms[arm], null, $"the run refused it: {why}");
        }
    }

    /// <summary>Ends the race and goes back to the settings in use at its start.</summary>
    /// <param name="by">Who stopped it; null when the race did itself.</param>
    public void Stop(string? by, string? why)
    {
        if (IsOver) return;
        State = RaceState.Stopped;
        Want(0, "the race was stopped");
        var text = by is null ? $"Stopped: {why}." : $"Stopped by {by}{(why is null ? "" : $": {why}")}.";
        Verdict = new RaceVerdict("stopped", text, null, Effect(BestSoFar()));
        Say(null, "stop", text);
    }

    /// <summary>Notes what a check raised on a step under a challenger; it is no alert of the run.</summary>
    public void Note(int? step, string text, int arm) => Say(step, "raised", text, arm);

    /// <summary>Arm of a revision of this race; null when it published no such revision.</summary>
    public int? ArmOf(int revision) => armOfRevision.TryGetValue(revision, out var arm) ? arm : null;

    /// <summary>The race runs and the settings in force are a challenger's.</summary>
    public bool ChallengerInForce => inForce is > 0 && State is RaceState.Running;

    private void BeginWhenReady()
    {
        if (before.Count > options.StepsBefore) before.RemoveRange(0, before.Count - options.StepsBefore);
        if (before.Count < options.StepsBefore) return;
        baseline = RaceBaseline.Of(System.Runtime.InteropServices.CollectionsMarshal.AsSpan(before), setup.Cap, options);
        if (setup.ScoreBy == RaceScore.Seconds && baseline.MeanSeconds is null)
        {
            Stop(null, "it should be scored by seconds, but the run sends none");
            return;
        }
        State = RaceState.Running;
        spoilt = baseline.AtCap;
        BeginRound();
    }

    private void Run(in RaceStep step, ArmState arm)
    {
        var use = "cost";
        var offence = arm.Index > 0 && arm.In && !MayReachCap(arm) ? Offence(step, arm) : null;
        arm.Credit += Reference - step.Count;
        if (arm.Index == 0 || !step.Converged) spoilt = true;
        if (offence is not null)
        {
            Keep(step, arm, use);
            Remove(arm, step.Step, offence);
            return;
        }
        if (arm.Index != block.Arm)
        {
            Keep(step, arm, use);
            if (++waited > options.Patience) Stop(null, $"the run took over no settings for {options.Patience} steps");
            return;
        }
        waited = 0;
        if (recovering)
        {
            Keep(step, arm, "discarded");
            recovering = false;
            NextBlock();
            return;
        }
        if (block.Discarded < DiscardedNow)
        {
            block.Discarded++;
            Keep(step, arm, "discarded");
            return;
        }
        if (!step.Whole || step.Outcome is StepOutcome.Rejected or StepOutcome.Failed || (setup.ScoreBy == RaceScore.Seconds && step.Seconds is null))
        {
            Keep(step, arm, use);
            return;
        }
        Keep(step, arm, "scored");
        if (block.Scored++ == 0) block.From = step.Step;
        block.Sum += setup.ScoreBy == RaceScore.Seconds ? step.Seconds!.Value : step.Count;
        if (block.Scored < ScoredNow) return;
        var score = block.Sum / block.Scored;
        arm.Score(round, score);
        blocks.Add((round, new RaceBlock(arm.Index, score, block.From, step.Step)));
        NextBlock();
    }

    /// <summary>Where arm 0 is at the cap, the discarded step of a challenger's block may reach it too.</summary>
    private bool MayReachCap(ArmState arm) => baseline!.AtCap && arm.Index == block.Arm && block.Discarded == 0;

    /// <summary>Iterations a step of arm 0 as last known.</summary>
    private double Reference => setup.ScoreBy == RaceScore.Iterations && arms[0].Scores.Count > 0 ? arms[0].Scores.Last().Value : baseline!.Mean;

    private int DiscardedNow => round > options.RoundsBeforeDropping ? options.DiscardedLater : options.Discarded;

    private int ScoredNow => round > options.RoundsBeforeDropping ? options.ScoredLater : options.Scored;

    private bool ArmZeroRests => options.RestsAtCap && baseline is { AtCap: true };

    private string? Offence(in RaceStep step, ArmState arm)
    {
        if (step.Outcome != StepOutcome.Converged)
            return $"step {Text(step.Step)} under it {(step.Outcome == StepOutcome.Capped ? "reached the cap" : step.Outcome == StepOutcome.Rejected ? "was rejected" : "failed")} after {Text(step.Count)} iterations";
        if (options.GuardOnCredit && arm.Credit >= step.Count - Reference) return null;
        return step.Count > baseline!.Limit ? $"step {Text(step.Step)} under it took {Text(step.Count)} iterations, more than the guard's {Text(baseline.Limit)}" : null;
    }

    private void Leave(ArmState arm, int? step, string why, bool runnerUp = false)
    {
        arm.Leave(round, why, runnerUp);
        Say(step, "out", $"{arm.Name} is out: {why}.", arm.Index);
    }

    /// <summary>Takes a challenger out; arm 0 is published at once and runs one step before the next block.</summary>
    private void Remove(ArmState arm, int? step, string why)
    {
        Leave(arm, step, why);
        if (State != RaceState.Running || block.Arm != arm.Index) return;
        if (arms.All(a => a.Index == 0 || !a.In))
        {
            End();
            return;
        }
        if (ArmZeroRests)
        {
            NextBlock();
            return;
        }
        recovering = true;
        block = new Block(0);
        Want(0, $"{arm.Name} is out");
    }

    private void Keep(in RaceStep step, ArmState arm, string use) => steps.Add(new RunStep(step, arm.Index, use, round));

    private void Say(int? step, string what, string text, int? arm = null) => log.Add(new RaceLogEntry(step, what, text, arm));

    private static bool Counts(in RaceStep step) => step.Whole && step.Outcome is StepOutcome.Converged or StepOutcome.Capped;

    private string Unit => setup.ScoreBy == RaceScore.Seconds ? "s" : "iterations";

    private static string Text(double value) => value.ToString("0.##", CultureInfo.InvariantCulture);

    private static string Signed(double value) => value.ToString("+0.##;−0.##;0", CultureInfo.InvariantCulture);

    private struct Block(int arm)
    {
        public readonly int Arm => arm;
        public int Discarded;
        public int Scored;
        public int From;
        public double Sum;
    }

    private readonly record struct RunStep(RaceStep Step, int Arm, string Use, int Round);
}
