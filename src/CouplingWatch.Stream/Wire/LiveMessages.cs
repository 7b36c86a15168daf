namespace CouplingWatch.Wire;

/// <summary>What <c>/hub/watch</c> sends, each under the name of its method.</summary>
/// <param name="Seq">The newest record of the run when it was sent; −1 before the first.</param>
public abstract record LiveMessage(string Run, long Seq);

/// <summary><c>iteration</c></summary>
public sealed record IterationMessage(string Run, long Seq, IterationView Iteration) : LiveMessage(Run, Seq);

/// <summary><c>step</c>: a step is complete.</summary>
public sealed record StepMessage(string Run, long Seq, StripBar Step) : LiveMessage(Run, Seq);

/// <summary><c>verdict</c></summary>
public sealed record VerdictMessage(string Run, long Seq, Verdict Verdict) : LiveMessage(Run, Seq);

/// <summary><c>alert</c>: opened, updated, acknowledged, shelved or closed.</summary>
public sealed record AlertMessage(string Run, long Seq, Alert Alert) : LiveMessage(Run, Seq);

/// <summary><c>advice</c>: everything that stands now; empty when nothing does.</summary>
public sealed record AdviceMessage(string Run, long Seq, IReadOnlyList<Advice> Advice) : LiveMessage(Run, Seq);

/// <summary><c>settings</c>: a revision was published, picked up, applied, refused or withdrawn.</summary>
public sealed record SettingsMessage(string Run, long Seq, SettingsRevision Settings) : LiveMessage(Run, Seq);

/// <summary><c>race</c></summary>
public sealed record RaceMessage(string Run, long Seq, RaceView Race) : LiveMessage(Run, Seq);
