namespace CouplingWatch.Ndjson;

/// <summary>Why a line is not a record of the stream: which line, which member, what was expected and what was found.</summary>
/// <param name="Line">Number of the line in its file or batch, from 1; 0 when it has none.</param>
/// <param name="Member">Path of the member, such as <c>residuals.deflection</c> or <c>basis.columns[2]</c>; null when the line as a whole is meant.</param>
/// <param name="Expected">What would have been right, as the end of "expected …".</param>
/// <param name="Found">What stood there, shortened; null when nothing did.</param>
/// <param name="Code">One of <see cref="ProblemCodes"/>.</param>
public sealed record RecordProblem(long Line, string? Member, string Expected, string? Found, string Code)
{
    /// <summary>The problem as one sentence.</summary>
    public string Sentence
    {
        get
        {
            var place = (Line > 0, Member) switch
            {
                (true, { } member) => $"line {Line}, member {member}: ",
                (true, null) => $"line {Line}: ",
                (false, { } member) => $"member {member}: ",
                _ => "",
            };
            return $"{place}expected {Expected}, found {Found ?? "nothing"}";
        }
    }
}

/// <summary>The stable codes of <see cref="RecordProblem"/>.</summary>
public static class ProblemCodes
{
    /// <summary>Not one JSON object.</summary>
    public const string Malformed = "malformed";
    public const string MissingMember = "missing-member";
    public const string WrongType = "wrong-type";
    /// <summary>A number or a text of the right type that cannot be meant, such as a negative step.</summary>
    public const string OutOfRange = "out-of-range";
    /// <summary>A word that is none of the words allowed here.</summary>
    public const string UnknownValue = "unknown-value";
    /// <summary>A vector, factor or list of the wrong length.</summary>
    public const string WrongLength = "wrong-length";
    public const string BadBase64 = "bad-base64";
    public const string TooDeep = "too-deep";
    /// <summary>A longer line than this reader takes.</summary>
    public const string TooLong = "too-long";
    public const string Duplicate = "duplicate";
    /// <summary>A format version other than 1.</summary>
    public const string UnsupportedFormat = "unsupported-format";
    /// <summary>A kind this version does not know, sent with <c>"must":true</c>.</summary>
    public const string MustUnderstand = "must-understand";
    /// <summary>The stream does not begin with <c>open</c>.</summary>
    public const string MissingOpen = "missing-open";
    /// <summary>A seq that was used before, with other content.</summary>
    public const string SeqConflict = "seq-conflict";
    /// <summary>Sketch rows or seed other than those fixed by the first sketch.</summary>
    public const string SketchChanged = "sketch-changed";
}
