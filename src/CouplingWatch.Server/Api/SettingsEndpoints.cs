using System.Globalization;
using CouplingWatch.Records;
using CouplingWatch.Server.Live;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Publishing;
using CouplingWatch.Server.Runs;
using CouplingWatch.Wire;
using Microsoft.Net.Http.Headers;

namespace CouplingWatch.Server.Api;

/// <summary>The settings of a run: what its code reads, what people publish, what became of it.</summary>
internal static class SettingsEndpoints
{
    /// <summary>Longest time an answer is held.</summary>
    private const int MostWait = 120;

    public static void MapSettings(this IEndpointRouteBuilder api)
    {
        api.MapGet("/runs/{run}/settings", GetAsync).Named("GetSettings", "The newest revision; ETag is its number, 304 when unchanged, ?wait=SECONDS holds the answer. With the run's own ?instance= it counts as picked up.").Produces<SettingsRevision>().Produces(304).Faults(400, 404);
        api.MapPut("/runs/{run}/settings", PutAsync).Named("PublishSettings", "Publishes a revision made from the one in If-Match.").Takes<SettingsProposal>().Produces<SettingsRevision>().Faults(400, 404, 409, 412, 422, 428);
        api.MapGet("/runs/{run}/settings/history", HistoryAsync).Named("GetSettingsHistory", "Every revision: who, why, applied from which step, effect.").Produces<Page<SettingsRevision>>().Faults(404);
        api.MapPost("/runs/{run}/ask-to-stop", AskToStopAsync).Named("AskToStop", "Publishes the command stop; the run decides.").Takes<StopRequest>().Produces<SettingsRevision>().Faults(400, 404, 409);
    }

    private static async Task<IResult> GetAsync(string run, int? wait, string? instance, HttpContext context, RunRegistry runs, TimeProvider time)
    {
        if (!runs.TryFind(run, out var host)) return RunEndpoints.Unknown(run);
        if (wait is < 0 or > MostWait) return Problem.BadQuery.Because($"wait is 0 to {MostWait} seconds, not {wait}.", ("member", "wait"), ("expected", $"0 to {MostWait}"));
        await host.EnsureLoadedAsync(context.RequestAborted);
        var changed = host.RevisionChanged;
        if (IsCurrent(context.Request, host.Revision) && wait > 0)
        {
            try { await changed.WaitAsync(TimeSpan.FromSeconds(wait.Value), time, context.RequestAborted); }
            catch (TimeoutException) { }
        }
        if (instance is not null && instance == host.Instance) await host.PickUpAsync(context.RequestAborted);
        SetTag(context.Response, host.Revision);
        if (IsCurrent(context.Request, host.Revision)) return TypedResults.StatusCode(StatusCodes.Status304NotModified);
        return TypedResults.Ok(await NewestAsync(host, context.RequestAborted));
    }

    private static async Task<IResult> PutAsync(string run, HttpContext context, RunRegistry runs)
    {
        if (!runs.TryFind(run, out var host)) return RunEndpoints.Unknown(run);
        if (!TryMadeFrom(context.Request, out var madeFrom, out var refusal)) return refusal!;
        var (proposal, bad) = await Body.ReadAsync<SettingsProposal>(context.Request);
        if (proposal is null) return bad!;
        return await AnswerAsync(host, await host.PublishAsync(proposal, madeFrom, WatchFeed.By, context.RequestAborted), context);
    }

    private static async Task<IResult> HistoryAsync(string run, RunRegistry runs, CancellationToken cancel)
    {
        if (!runs.TryFind(run, out var host)) return RunEndpoints.Unknown(run);
        return TypedResults.Ok(Page<SettingsRevision>.Whole(await host.AskAsync<IReadOnlyList<SettingsRevision>>(m => [.. m.Revisions], [], cancel)));
    }

    private static async Task<IResult> AskToStopAsync(string run, HttpContext context, RunRegistry runs)
    {
        if (!runs.TryFind(run, out var host)) return RunEndpoints.Unknown(run);
        var (request, bad) = await Body.ReadAsync<StopRequest>(context.Request);
        if (request is null) return bad!;
        var command = request.When switch { null or "after-step" => Commands.StopAfterStep, "after-checkpoint" => Commands.StopAfterCheckpoint, _ => null };
        if (command is null) return Problem.Malformed.Because($"“{request.When}” is no time to stop.", ("member", "when"), ("expected", "after-step, after-checkpoint"));
        var proposal = new SettingsProposal { Settings = new CouplingSettings(), Commands = [command], Reason = request.Reason };
        return await AnswerAsync(host, await host.PublishAsync(proposal, null, WatchFeed.By, context.RequestAborted), context);
    }

    internal static async Task<IResult> AnswerAsync(RunHost host, Published published, HttpContext context)
    {
        if (published.Refusal is { } refusal) return refusal.Answer();
        SetTag(context.Response, published.Revision!.Value);
        return TypedResults.Ok(await NewestAsync(host, context.RequestAborted));
    }

    /// <summary>The newest revision; what <c>open</c> declared while the judgement has none.</summary>
    private static Task<SettingsRevision> NewestAsync(RunHost host, CancellationToken cancel)
    {
        var declared = new SettingsRevision { Revision = host.Revision, Settings = host.Open?.Settings ?? new(), State = RevisionState.Applied };
        return host.AskAsync(m => m.Revisions.LastOrDefault() ?? declared, declared, cancel);
    }

    private static bool TryMadeFrom(HttpRequest request, out int? madeFrom, out IResult? refusal)
    {
        madeFrom = null;
        refusal = null;
        var header = request.Headers.IfMatch.ToString();
        if (header.Length == 0)
            refusal = Problem.NoMatch.Because("Say in If-Match which revision the change was made from, such as If-Match: \"3\".", ("member", "If-Match"));
        else if (int.TryParse(header.Trim().Trim('"'), NumberStyles.None, CultureInfo.InvariantCulture, out var number))
            madeFrom = number;
        else
            refusal = Problem.Malformed.Because($"If-Match is {header} where a revision was expected.", ("member", "If-Match"), ("expected", "a revision such as \"3\""));
        return refusal is null;
    }

    private static void SetTag(HttpResponse response, int revision) => response.Headers.ETag = Tag(revision);

    private static string Tag(int revision) => string.Create(CultureInfo.InvariantCulture, $"\"{revision}\"");

    private static bool IsCurrent(HttpRequest request, int revision) =>
        EntityTagHeaderValue.TryParseList(request.Headers.IfNoneMatch, out var tags) && tags.Any(t => t.Tag == Tag(revision));
}

/// <param name="When"><c>after-step</c> (default) or <c>after-checkpoint</c>.</param>
internal sealed record StopRequest(string? When = null, string? Reason = null);
