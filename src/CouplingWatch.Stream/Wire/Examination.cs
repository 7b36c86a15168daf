namespace CouplingWatch.Wire;

/// <summary>What a recording would have been told while it was live.</summary>
/// <param name="File">The file, or the name it was examined under.</param>
/// <param name="Verdict">As it stood at the end.</param>
/// <param name="Steps">Steps with a verdict of the code.</param>
/// <param name="Alerts">Open and closed ones, in order of seq.</param>
/// <param name="Advice">All that was given, in order of seq.</param>
/// <param name="NotJudged">Checks that lacked data, and what to send for them.</param>
public sealed record Examination(string File, Verdict Verdict, int Steps, long Iterations, IReadOnlyList<Alert> Alerts, IReadOnlyList<Advice> Advice, IReadOnlyList<NotJudged> NotJudged)
{
    /// <summary>What was passed over (a half-written last line, damaged bytes, records missing or sent twice), one sentence each.</summary>
    public IReadOnlyList<string> Notes { get; init; } = [];

    /// <summary>Why reading ended early; null when the whole recording was read.</summary>
    public ExaminationProblem? Problem { get; init; }
}

/// <param name="Line">From 1.</param>
/// <param name="Sentence">Line, member, what was expected and what stood there, as one sentence.</param>
public sealed record ExaminationProblem(long Line, string? Member, string Expected, string? Found, string Code, string Sentence);
