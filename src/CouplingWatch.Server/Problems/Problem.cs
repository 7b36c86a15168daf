namespace CouplingWatch.Server.Problems;

/// <summary>A fault that the interface can answer, with its stable type, title and status (RFC 9457).</summary>
/// <param name="Name">Last part of the type URI <c>/problems/NAME</c>; never changes.</param>
public sealed record Problem(string Name, int Status, string Title)
{
    public string Type => "/problems/" + Name;

    public static readonly Problem Malformed = new("malformed", 400, "A record or a body is not as the format asks.");
    public static readonly Problem BadQuery = new("bad-query", 400, "A parameter of the address is out of its range.");
    public static readonly Problem BadRunName = new("bad-run-name", 400, "The run's name is not allowed.");
    public static readonly Problem CrossOrigin = new("cross-origin", 403, "The request comes from another site.");
    public static readonly Problem NoSuchCall = new("no-such-call", 404, "There is no such call.");
    public static readonly Problem UnknownRun = new("unknown-run", 404, "There is no such run.");
    public static readonly Problem UnknownAlert = new("unknown-alert", 404, "There is no such alert.");
    public static readonly Problem UnknownAdvice = new("unknown-advice", 404, "There is no such advice.");
    public static readonly Problem UnknownRehearsal = new("unknown-rehearsal", 404, "There is no such rehearsal.");
    public static readonly Problem UnknownRace = new("unknown-race", 404, "There is no such race.");
    public static readonly Problem NotKept = new("not-kept", 404, "Nothing is kept for that step or iteration.");
    public static readonly Problem SeqGap = new("seq-gap", 409, "Records are missing before this one.");
    public static readonly Problem SeqConflict = new("seq-conflict", 409, "Another record was kept under this seq.");
    public static readonly Problem RunExists = new("run-exists", 409, "Another instance has this run name.");
    public static readonly Problem RunClosed = new("run-closed", 409, "The run was closed.");
    public static readonly Problem NotAdjustable = new("not-adjustable", 409, "The run does not take this change.");
    public static readonly Problem RaceRunning = new("race-running", 409, "A race publishes the settings of this run just now.");
    public static readonly Problem NoRace = new("no-race", 409, "A race cannot begin.");
    public static readonly Problem AlertClosed = new("alert-closed", 409, "The alert is closed.");
    public static readonly Problem Stale = new("stale-revision", 412, "Another revision came first.");
    public static readonly Problem TooLarge = new("too-large", 413, "The body is larger than the server takes at once.");
    public static readonly Problem MediaType = new("media-type", 415, "The body is of another type than this call takes.");
    public static readonly Problem Unconfirmed = new("unconfirmed", 422, "The change alters the result and was not confirmed.");
    public static readonly Problem OutOfRange = new("out-of-range", 422, "A setting lies outside what the run declared.");
    public static readonly Problem NoMatch = new("if-match-missing", 428, "The request must say which revision it was made from.");
    public static readonly Problem Busy = new("busy", 429, "The run sends faster than its records can be written down.");
    public static readonly Problem Internal = new("internal", 500, "The server met a fault of its own.");
    public static readonly Problem JournalDown = new("journal-unavailable", 503, "The journal cannot be written just now.");
    public static readonly Problem NotReady = new("not-ready", 503, "The server is not ready.");
    public static readonly Problem NoRoom = new("no-room", 507, "The journal has no room.");

    /// <summary>Every fault by its name, for the page that explains a type.</summary>
    public static readonly IReadOnlyDictionary<string, Problem> ByName = new[]
    {
        Malformed, BadQuery, BadRunName, CrossOrigin, NoSuchCall, UnknownRun, UnknownAlert, UnknownAdvice, UnknownRehearsal, UnknownRace, NotKept, SeqGap, SeqConflict, RunExists, RunClosed,
        NotAdjustable, RaceRunning, NoRace, AlertClosed, Stale, TooLarge, MediaType, Unconfirmed, OutOfRange, NoMatch, Busy, Internal, JournalDown, NotReady, NoRoom,
    }.ToDictionary(p => p.Name, StringComparer.Ordinal);

    /// <summary>The answer for one occurrence.</summary>
    /// <param name="detail">What happened this time, in a sentence.</param>
    /// <param name="more">Further members: <c>next</c>, <c>line</c>, <c>member</c>, <c>expected</c>, …</param>
    public IResult Because(string detail, params (string Name, object? Value)[] more) =>
        TypedResults.Problem(detail, null, Status, Title, Type, more.Where(m => m.Value is not null).Select(m => KeyValuePair.Create(m.Name, m.Value)));
}
