using CouplingWatch.Server.Live;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Publishing;
using CouplingWatch.Server.Runs;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Api;

/// <summary>Standing advice: taken up as a settings revision, or dismissed with a reason.</summary>
internal static class AdviceEndpoints
{
    public static void MapAdvice(this IEndpointRouteBuilder api)
    {
        api.MapGet("/runs/{run}/advice", ListAsync).Named("ListAdvice", "Standing advice with what it rests on.").Produces<Page<Advice>>().Faults(404);
        api.MapPost("/runs/{run}/advice/{id}/adopt", AdoptAsync).Named("AdoptAdvice", "Publishes the settings revision that the advice shows.").Takes<AdoptRequest>().Produces<SettingsRevision>().Faults(400, 404, 409, 422);
        api.MapPost("/runs/{run}/advice/{id}/dismiss", DismissAsync).Named("DismissAdvice", "Not taken, with a reason.").Takes<DismissRequest>().Produces(204).Faults(400, 404);
    }

    private static async Task<IResult> ListAsync(string run, RunRegistry runs, CancellationToken cancel) => runs.TryFind(run, out var host)
        ? TypedResults.Ok(Page<Advice>.Whole(await host.AskAsync<IReadOnlyList<Advice>>(m => [.. m.Advice], [], cancel)))
        : RunEndpoints.Unknown(run);

    private static async Task<IResult> AdoptAsync(string run, string id, HttpContext context, RunRegistry runs)
    {
        if (!runs.TryFind(run, out var host)) return RunEndpoints.Unknown(run);
        var (request, bad) = await Body.ReadAsync<AdoptRequest>(context.Request);
        if (request is null) return bad!;
        var advice = await host.AskAsync(m => m.Advice.FirstOrDefault(a => a.Id == id), null, context.RequestAborted);
        if (advice is null) return Problem.UnknownAdvice.Because($"Run {run} has no advice “{id}” any more; its ground may be gone.", ("member", "id"));
        var proposal = AdviceProposal.Of(advice, request.Reason, request.Confirm);
        if (proposal is null) return Problem.NotAdjustable.Because($"This advice is no change of a setting in flight: {advice.Text}.", ("member", advice.Setting));
        return await SettingsEndpoints.AnswerAsync(host, await host.PublishAsync(proposal, null, WatchFeed.By, context.RequestAborted), context);
    }

    private static async Task<IResult> DismissAsync(string run, string id, HttpContext context, RunRegistry runs)
    {
        if (!runs.TryFind(run, out var host)) return RunEndpoints.Unknown(run);
        var (request, bad) = await Body.ReadAsync<DismissRequest>(context.Request);
        if (request is null) return bad!;
        if (string.IsNullOrWhiteSpace(request.Reason)) return Problem.Malformed.Because("Dismissing advice needs a reason.", ("member", "reason"), ("expected", "a sentence"));
        var found = await host.DecideAsync((h, m) => m.Advice.Any(a => a.Id == id)
            ? ((ServerEvent?)new DismissedEvent(id, WatchFeed.By, request.Reason) { At = h.Now }, true)
            : (null, false), context.RequestAborted);
        return found ? TypedResults.NoContent() : Problem.UnknownAdvice.Because($"Run {run} has no advice “{id}” any more.", ("member", "id"));
    }
}

internal sealed record AdoptRequest(string? Reason = null, bool? Confirm = null);

internal sealed record DismissRequest(string? Reason = null);
