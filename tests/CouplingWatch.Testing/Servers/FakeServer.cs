using System.Net;
using System.Net.Http.Headers;
using System.Text;
using System.Text.Json;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Testing.Servers;

/// <summary>Answers posts as the interface says, in process: keeps records in order, refuses gaps and what it is told to refuse, fails when told to.</summary>
public sealed class FakeServer : HttpMessageHandler
{
    private readonly Lock gate = new();
    private readonly List<StreamRecord> kept = [];
    private readonly List<string> beats = [];
    private readonly Queue<Func<HttpResponseMessage>> faults = new();

    public int Posts { get; private set; }

    public int Revision { get; set; }

    public SettingsRevision? Settings { get; set; }

    /// <summary>True: every post fails at the connection.</summary>
    public bool Down { get; set; }

    /// <summary>The reason to refuse a record, or null to take it.</summary>
    public Func<StreamRecord, string?> Refuses { get; set; } = _ => null;

    /// <summary>Most bytes of a post.</summary>
    public long MostBytes { get; set; } = long.MaxValue;

    /// <summary>Done once, before the next post is taken.</summary>
    public Action? Before { get; set; }

    public List<string> Queries { get; } = [];

    public IReadOnlyList<StreamRecord> Kept
    {
        get { lock (gate) return [.. kept]; }
    }

    public IReadOnlyList<string> Beats
    {
        get { lock (gate) return [.. beats]; }
    }

    /// <summary>The next post is answered with this instead.</summary>
    public void Next(HttpStatusCode status, string? type = null, TimeSpan? retryAfter = null, string more = "") => faults.Enqueue(() =>
    {
        var response = Problem(status, type ?? "x", more);
        if (retryAfter is { } wait) response.Headers.RetryAfter = new RetryConditionHeaderValue(wait);
        return response;
    });

    /// <summary>Keeps a record as if it had been posted.</summary>
    public void Add(StreamRecord record)
    {
        lock (gate) kept.Add(record);
    }

    /// <summary>Loses what it kept, from a seq on.</summary>
    public void Forget(int from)
    {
        lock (gate) kept.RemoveRange(from, kept.Count - from);
    }

    protected override async Task<HttpResponseMessage> SendAsync(HttpRequestMessage request, CancellationToken cancellationToken)
    {
        if (request.Method == HttpMethod.Get) return Get(request.RequestUri!.AbsolutePath);
        var body = await request.Content!.ReadAsByteArrayAsync(cancellationToken);
        lock (gate)
        {
            Posts++;
            (var before, Before) = (Before, null);
            before?.Invoke();
            Queries.Add(request.RequestUri!.PathAndQuery);
            if (Down) throw new HttpRequestException("connection refused");
            if (faults.TryDequeue(out var fault)) return fault();
            return body.Length > MostBytes ? Problem(HttpStatusCode.RequestEntityTooLarge, "too-large", $"\"next\":{kept.Count},") : Take(body);
        }
    }

    private HttpResponseMessage Get(string path)
    {
        if (Down) throw new HttpRequestException("connection refused");
        if (path == "/readyz") return Answer(HttpStatusCode.OK, "{}");
        if (path.EndsWith("/settings", StringComparison.Ordinal)) return Answer(HttpStatusCode.OK, JsonSerializer.Serialize(Settings, WireJson.Options));
        if (Kept.Count == 0) return Problem(HttpStatusCode.NotFound, "unknown-run", "");
        var summary = new RunSummary { Run = path[(path.LastIndexOf('/') + 1)..], State = "live", Verdict = new Verdict("learning", "Learning", ""), NextSeq = Kept.Count };
        return Answer(HttpStatusCode.OK, JsonSerializer.Serialize(new RunDetail { Summary = summary, RestsOn = "", Settings = new CouplingSettings() }, WireJson.Options));
    }

    private HttpResponseMessage Take(byte[] body)
    {
        var reader = new RecordReader();
        var number = 0;
        foreach (var line in Encoding.UTF8.GetString(body).Split('\n', StringSplitOptions.RemoveEmptyEntries))
        {
            number++;
            var result = reader.Read(Encoding.UTF8.GetBytes(line), number);
            if (result.Problem is { } problem) return Problem(HttpStatusCode.BadRequest, "malformed", $"\"line\":{number},\"next\":{kept.Count},", problem.Sentence);
            var record = result.Record!;
            if (record is BeatRecord)
            {
                beats.Add(line);
                continue;
            }
            if (record.Seq > kept.Count) return Problem(HttpStatusCode.Conflict, "seq-gap", $"\"next\":{kept.Count},");
            if (record.Seq < kept.Count)
            {
                if (!RecordWriter.Line(kept[(int)record.Seq]).AsSpan().SequenceEqual(RecordWriter.Line(record))) return Problem(HttpStatusCode.Conflict, "seq-conflict", $"\"seq\":{record.Seq},\"next\":{kept.Count},");
                continue;
            }
            if (Refuses(record) is { } why) return Problem(HttpStatusCode.BadRequest, "malformed", $"\"line\":{number},\"next\":{kept.Count},", why);
            kept.Add(record);
        }
        return Answer(HttpStatusCode.OK, $$"""{"next":{{kept.Count}},"revision":{{Revision}}}""");
    }

    private static HttpResponseMessage Problem(HttpStatusCode status, string type, string more, string detail = "no") =>
        Answer(status, $$"""{"type":"/problems/{{type}}","title":"t",{{more}}"detail":"{{JsonEncodedText.Encode(detail)}}","status":{{(int)status}}}""");

    private static HttpResponseMessage Answer(HttpStatusCode status, string json) => new(status) { Content = new StringContent(json, Encoding.UTF8, "application/json") };
}
