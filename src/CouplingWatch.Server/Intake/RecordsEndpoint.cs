using System.Buffers;
using System.Globalization;
using System.Security.Cryptography;
using CouplingWatch.Ndjson;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Runs;
using Microsoft.AspNetCore.Http.Features;

namespace CouplingWatch.Server.Intake;

/// <summary><c>POST /api/runs/{run}/records</c>: takes records from the pipe, in batches, and answers when they are durable.</summary>
internal static class RecordsEndpoint
{
    /// <summary>Longest body taken at once.</summary>
    public const long BodyBytes = 64L * 1024 * 1024;
    private const int BatchRecords = 512;
    private const int BatchBytes = 4 * 1024 * 1024;

    /// <summary>The types a body may say it is of; a browser cannot send any of them to another site unasked.</summary>
    public static readonly string[] MediaTypes = ["application/x-ndjson", "application/ndjson", "application/jsonl", "application/json"];

    public static async Task<IResult> PostAsync(string run, string? instance, HttpContext context, RunRegistry runs)
    {
        if (!RunName.IsAllowed(run)) return RunName.Refuse(run);
        if (RefuseBody(context.Request) is { } refusal) return refusal;
        var host = runs.TryFind(run, out var known) ? known : null;
        // The first post after a start waits until the run was read from the journal: only then are the lengths of its vectors known.
        if (host is not null) await host.EnsureLoadedAsync(context.RequestAborted);
        var answer = new IntakeAnswer(host?.NextSeq ?? 0, host?.Revision ?? 0);
        var reader = new RecordReader { Shape = host?.Shape };
        var batch = new List<IncomingRecord>();
        long bytes = 0, batchBytes = 0;
        IntakeFault? fault = null;
        try
        {
            await foreach (var line in NdjsonStream.ReadAsync(context.Request.BodyReader, reader, cancel: context.RequestAborted))
            {
                bytes += line.Bytes.Length + 1;
                batchBytes += line.Bytes.Length;
                if (bytes > BodyBytes + 1 || line.Result.Problem?.Code == ProblemCodes.TooLong) fault = TooLarge(line.Number);
                else if (line.Result.Problem is { } problem) fault = Malformed(problem);
                else batch.Add(Incoming(line));
                if (fault is not null) break;
                if (batch.Count < BatchRecords && batchBytes < BatchBytes) continue;
                answer = await AcceptAsync(batch);
                if (answer.Fault is not null) break;
                batch.Clear();
                batchBytes = 0;
            }
        }
        catch (BadHttpRequestException e) when (e.StatusCode == StatusCodes.Status413PayloadTooLarge)
        {
            fault = TooLarge(null);
        }
        if (batch.Count > 0 && answer.Fault is null) answer = await AcceptAsync(batch);
        fault = answer.Fault ?? fault;
        return fault is null ? TypedResults.Ok(new RecordsAnswer(answer.Next, answer.Revision)) : Refuse(fault, answer, context.Response);

        async Task<IntakeAnswer> AcceptAsync(List<IncomingRecord> records)
        {
            // A run begins with an accepted record, never with a refused one.
            if (host is null && !runs.TryFind(run, out host))
            {
                if (records[0].Record.Seq > 0)
                    return new IntakeAnswer(0, 0, new(Problem.SeqGap, $"Run {run} is not known here, so its first record must have seq 0, not {records[0].Record.Seq}.", records[0].Line, records[0].Record.Seq, "seq", "0"));
                if (records[0].Record is not Records.OpenRecord)
                    return new IntakeAnswer(0, 0, new(Problem.Malformed, $"Line {records[0].Line}: the first record of run {run} must be of kind “open”, this one is “{records[0].Record.Kind}”.", records[0].Line, records[0].Record.Seq, "kind", "open"));
                host = runs.Begin(run);
            }
            return await host.AcceptAsync(records, instance, context.RequestAborted);
        }
    }

    internal static IResult? RefuseBody(HttpRequest request)
    {
        var type = request.ContentType?.Split(';', 2)[0].Trim();
        if (!MediaTypes.Contains(type, StringComparer.OrdinalIgnoreCase))
            return Problem.MediaType.Because($"Records come as application/x-ndjson, not as {type ?? "a body without a type"}.", ("expected", MediaTypes[0]));
        if (request.Headers.ContentEncoding.Count > 0)
            return Problem.MediaType.Because("Records come without a content encoding.", ("member", "Content-Encoding"), ("expected", "no encoding"));
        if (request.HttpContext.Features.Get<IHttpMaxRequestBodySizeFeature>() is { IsReadOnly: false } size) size.MaxRequestBodySize = BodyBytes;
        return request.ContentLength > BodyBytes
            ? Problem.TooLarge.Because(string.Create(CultureInfo.InvariantCulture, $"The body has {request.ContentLength} bytes, at most {BodyBytes} are taken at once; send fewer records a post."), ("expected", BodyBytes))
            : null;
    }

    private static IncomingRecord Incoming(in NdjsonLine line)
    {
        var body = line.Bytes.ToArray().AsMemory();
        if (body.Span.EndsWith("\r"u8)) body = body[..^1];
        return KeptForm.Of(line.Result.Record!, body, SHA256.HashData(body.Span), (int)line.Number);
    }

    private static IntakeFault Malformed(RecordProblem problem) =>
        new(Problem.Malformed, Sentence(problem), (int)problem.Line, Member: problem.Member, Expected: problem.Expected) { Code = problem.Code };

    internal static string Sentence(RecordProblem problem) => char.ToUpperInvariant(problem.Sentence[0]) + problem.Sentence[1..] + ".";

    private static IntakeFault TooLarge(long? line) => new(Problem.TooLarge,
        string.Create(CultureInfo.InvariantCulture, $"The body is longer than {BodyBytes} bytes; send fewer records a post."), (int?)line);

    private static IResult Refuse(IntakeFault fault, IntakeAnswer answer, HttpResponse response)
    {
        if (fault.RetryAfterSeconds is { } seconds) response.Headers.RetryAfter = seconds.ToString(CultureInfo.InvariantCulture);
        return fault.Problem.Because(fault.Detail, ("next", answer.Next), ("revision", answer.Revision), ("line", fault.Line), ("seq", fault.Seq),
            ("member", fault.Member), ("expected", fault.Expected), ("code", fault.Code));
    }
}

/// <param name="Next">Seq expected next.</param>
/// <param name="Revision">Newest settings revision of the run.</param>
internal sealed record RecordsAnswer(long Next, int Revision);
