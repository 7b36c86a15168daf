using System.Globalization;
using CouplingWatch.Monitoring;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;
using CouplingWatch.Server.Intake;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Runs;
using CouplingWatch.Sketching;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Api;

/// <summary><c>POST /api/examinations</c>: judges a recording as if it had been live, and keeps nothing.</summary>
internal static class ExaminationEndpoint
{
    /// <summary>Name under which an examined recording is judged when the address gives none.</summary>
    private const string Unnamed = "examined";
    private static readonly SemaphoreSlim AtOnce = new(Math.Max(1, Environment.ProcessorCount - 1));

    public static void MapExaminations(this IEndpointRouteBuilder api) =>
        api.MapPost("/examinations", PostAsync).Named("Examine", "Judges an uploaded recording without keeping it.").Takes<string>(RecordsEndpoint.MediaTypes[0]).Produces<Examination>().Faults(400, 413, 415);

    private static async Task<IResult> PostAsync(string? run, HttpContext context, RunSurroundings around)
    {
        var name = run ?? Unnamed;
        if (!RunName.IsAllowed(name)) return RunName.Refuse(name);
        if (RecordsEndpoint.RefuseBody(context.Request) is { } refusal) return refusal;
        await AtOnce.WaitAsync(context.RequestAborted);
        try { return await JudgeAsync(name, context, around); }
        finally { AtOnce.Release(); }
    }

    private static async Task<IResult> JudgeAsync(string name, HttpContext context, RunSurroundings around)
    {
        var monitor = new RunMonitor(name, around.MonitorOptions);
        var received = around.Now();
        long bytes = 0, expected = 0;
        await foreach (var line in NdjsonStream.ReadAsync(context.Request.BodyReader, new RecordReader(), cancel: context.RequestAborted))
        {
            bytes += line.Bytes.Length + 1;
            if (bytes > RecordsEndpoint.BodyBytes + 1 || line.Result.Problem?.Code == ProblemCodes.TooLong)
                return Problem.TooLarge.Because(string.Create(CultureInfo.InvariantCulture, $"The recording is longer than {RecordsEndpoint.BodyBytes} bytes; examine it with the command line."));
            if (line.Result.Problem is { } problem)
                return Problem.Malformed.Because(RecordsEndpoint.Sentence(problem), ("line", problem.Line), ("member", problem.Member), ("expected", problem.Expected), ("code", problem.Code));
            var record = line.Result.Record!;
            if (record.Seq < 0) continue;
            if (expected == 0 && record is not OpenRecord)
                return Problem.Malformed.Because(string.Create(CultureInfo.InvariantCulture, $"Line {line.Number}: a recording begins with “open”, not with “{record.Kind}”."), ("line", line.Number), ("member", "kind"), ("expected", "open"));
            if (record.Seq != expected)
                return Problem.SeqGap.Because(string.Create(CultureInfo.InvariantCulture, $"Line {line.Number}: seq {record.Seq} came where {expected} was expected."), ("line", line.Number), ("member", "seq"), ("expected", expected));
            expected++;
            monitor.Observe(VectorRetention.Keep(record), received);
        }
        if (expected == 0) return Problem.Malformed.Because("The recording is empty.", ("line", 1), ("expected", "records, the first of kind open"));
        monitor.EndOfRecording();
        return TypedResults.Ok(new Examination(name, monitor.Verdict, monitor.StepCount, monitor.IterationCount, [.. monitor.Alerts.OrderBy(a => a.Seq)], [.. monitor.AdviceGiven.OrderBy(a => a.Seq)], [.. monitor.NotJudged]));
    }
}

/// <summary>What a recording would have been told while it was live.</summary>
internal sealed record Examination(string File, Verdict Verdict, int Steps, long Iterations, IReadOnlyList<Alert> Alerts, IReadOnlyList<Advice> Advice, IReadOnlyList<NotJudged> NotJudged);
