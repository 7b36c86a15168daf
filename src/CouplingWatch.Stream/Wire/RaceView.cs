using CouplingWatch.Records;

namespace CouplingWatch.Wire;

/// <summary>waiting: the twelve steps before it are not complete yet; running; watching: decided, the winner is being watched; finished; stopped: by a person or because nothing could be compared any more.</summary>
public enum RaceState { Waiting, Running, Watching, Finished, Stopped }

/// <summary>What a step is scored by.</summary>
public enum RaceScore { Iterations, Seconds }

/// <summary>A race: settings taking turns on the running problem under a guard.</summary>
public sealed record RaceView
{
    /// <summary>Number of the race in its run as text: <c>race-1</c>.</summary>
    public required string Id { get; init; }
    public required string Run { get; init; }
    public RaceState State { get; init; }
    public string? By { get; init; }
    public DateTimeOffset? StartedAt { get; init; }
    public string? Reason { get; init; }
    /// <summary>Seed of the orders drawn; the same seed and the same records give the same race.</summary>
    public long Seed { get; init; }
    public RaceScore ScoreBy { get; init; }
    /// <summary>One sentence: what it does now, or how it ended.</summary>
    public required string Text { get; init; }
    public int? FirstStep { get; init; }
    public int? LastStep { get; init; }
    /// <summary>Complete steps the race still waits for before its first round; 0 once it runs.</summary>
    public int StepsMissing { get; init; }
    public int RoundsPlanned { get; init; }
    /// <summary>Arm whose settings the run says are in force; null when they belong to no arm.</summary>
    public int? ArmInForce { get; init; }
    /// <summary>Arm whose block is on.</summary>
    public int? ArmInTurn { get; init; }
    /// <summary>Arm 0 holds the settings in use at the start.</summary>
    public IReadOnlyList<RaceArm> Arms { get; init; } = [];
    public IReadOnlyList<RaceRound> Rounds { get; init; } = [];
    /// <summary>Every step since the race began, oldest first.</summary>
    public IReadOnlyList<RaceStepView> Steps { get; init; } = [];
    public RaceGuard? Guard { get; init; }
    public RaceCost Cost { get; init; } = new(0, 0, null);
    public RaceVerdict? Verdict { get; init; }
    public IReadOnlyList<RaceLogEntry> Log { get; init; } = [];
}

/// <summary>Settings that take part.</summary>
public sealed record RaceArm
{
    public required int Arm { get; init; }
    /// <summary>What sets it apart from arm 0: "own-norm 1e-4, history 8"; "in use" for arm 0.</summary>
    public required string Name { get; init; }
    /// <summary>The complete settings.</summary>
    public required CouplingSettings Settings { get; init; }
    /// <summary>What it changes against arm 0.</summary>
    public IReadOnlyList<SettingChange> Changes { get; init; } = [];
    /// <summary>rule, rehearsal, sister-run or person; in-use for arm 0.</summary>
    public required string Origin { get; init; }
    /// <summary>in, out, winner.</summary>
    public required string State { get; init; }
    /// <summary>One sentence; null while it is in.</summary>
    public string? OutWhy { get; init; }
    public int? OutRound { get; init; }
    /// <summary>Mean of its round scores; null before the first.</summary>
    public double? Mean { get; init; }
    /// <summary>Mean difference to arm 0 over the rounds both ran; negative is better.</summary>
    public double? Difference { get; init; }
    public int Rounds { get; init; }
    public int StepsRun { get; init; }
    public int CappedSteps { get; init; }
}

/// <param name="Order">Arms in the order drawn.</param>
/// <param name="Scores">Blocks that are scored.</param>
public sealed record RaceRound(int Round, IReadOnlyList<int> Order, IReadOnlyList<RaceBlock> Scores);

/// <param name="Score">Mean count (or seconds) of the scored steps.</param>
public sealed record RaceBlock(int Arm, double Score, int FromStep, int ToStep);

/// <param name="Arm">Arm in force; null when the settings belong to no arm.</param>
/// <param name="Use">scored, discarded, cost (ran under settings that were not, or no longer, in turn), or watched (after the verdict).</param>
public sealed record RaceStepView(int Step, int? Arm, int Count, bool Converged, string Use, int Round);

/// <param name="Limit">A challenger whose step takes more iterations is out.</param>
/// <param name="Before90">90 % quantile of the counts before the race.</param>
/// <param name="AtCap">The settings in use already reach the cap, so challengers start without history.</param>
public sealed record RaceGuard(double Limit, double Before90, double Before, int? Cap, bool AtCap);

/// <summary>What the race has cost against staying with arm 0; negative is saved.</summary>
/// <param name="Iterations">Σ over the steps under challengers of count − arm 0's mean of that round.</param>
/// <param name="CappedSteps">Steps under challengers that did not converge.</param>
/// <param name="Seconds">The same in wall seconds of the passes; null when none were sent.</param>
public sealed record RaceCost(double Iterations, int CappedSteps, double? Seconds);

/// <summary>How the race ended.</summary>
/// <param name="Code">publish, keep, nothing-compared, stopped, fell-back.</param>
/// <param name="Winner">Arm published; null when arm 0 stays.</param>
/// <param name="Watch">What became of the winner: watching, held, fell-back; null when nothing was published.</param>
public sealed record RaceVerdict(string Code, string Text, int? Winner, RaceEffect? Effect, string? Watch = null);

/// <summary>Difference of a challenger to arm 0 a step, from the paired rounds.</summary>
/// <param name="Arm">The winner, or the best challenger that ran every round.</param>
/// <param name="Mean">Mean paired difference (iterations or seconds a step); negative is better.</param>
/// <param name="Low">Lower end of the permutation interval; null: too few rounds for one.</param>
/// <param name="Level">Confidence reached, such as 0.9375 with five rounds.</param>
/// <param name="ChosenAmong">Challengers it was chosen among; with more than one the interval flatters it, and the pages say so.</param>
public sealed record RaceEffect(int Arm, double Mean, double? Low, double? High, double? Level, int Rounds, int ChosenAmong);

/// <param name="What">start, turn, round, out, verdict, raised, refused, fall-back, stop.</param>
public sealed record RaceLogEntry(int? Step, string What, string Text, int? Arm = null);

/// <summary>Body of <c>POST …/races</c>.</summary>
public sealed record RaceProposal
{
    /// <summary>Each only what differs from the settings in use; null or empty: chosen by rule.</summary>
    public IReadOnlyList<CouplingSettings>? Challengers { get; init; }
    /// <summary>True: add the ones chosen by rule after the given ones, up to six.</summary>
    public bool FillUp { get; init; }
    public RaceScore ScoreBy { get; init; }
    /// <summary>Null: drawn by the server and recorded.</summary>
    public long? Seed { get; init; }
    public string? Reason { get; init; }
}

/// <summary>A challenger as it enters a race.</summary>
/// <param name="Settings">The complete settings.</param>
/// <param name="Origin">rule, rehearsal, sister-run or person.</param>
public sealed record RaceChallenger(CouplingSettings Settings, string Origin);
