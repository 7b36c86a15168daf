using CouplingWatch.Server.Live;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Runs;
using CouplingWatch.Server.Trials;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Api;

/// <summary>Races: settings that take turns on the running problem.</summary>
internal static class RaceEndpoints
{
    public static void MapRaces(this IEndpointRouteBuilder api)
    {
        api.MapPost("/runs/{run}/races", StartAsync).Named("StartRace", "Begins a race; without challengers they are chosen by rule.").Takes<RaceProposal>().Produces<RaceView>(201).Faults(400, 404, 409);
        api.MapGet("/runs/{run}/races", ListAsync).Named("ListRaces", "The races of a run, oldest first.").Produces<Page<RaceView>>().Faults(404);
        api.MapGet("/runs/{run}/races/{id}", GetAsync).Named("GetRace", "Arms, rounds, who is out and why, cost so far, verdict with its interval.").Produces<RaceView>().Faults(404);
        api.MapPost("/runs/{run}/races/{id}/stop", StopAsync).Named("StopRace", "Ends it; the settings in use before come back.").Takes<StopRaceRequest>().Produces<RaceView>().Faults(404, 409);
    }

    private static async Task<IResult> StartAsync(string run, HttpContext context, RunRegistry runs, RaceStart races)
    {
        if (!runs.TryFind(run, out var host)) return RunEndpoints.Unknown(run);
        var (proposal, bad) = await Body.ReadAsync(context.Request, new RaceProposal());
        if (proposal is null) return bad!;
        var (race, refusal) = await races.StartAsync(host, proposal, WatchFeed.By, context.RequestAborted);
        return refusal?.Answer() ?? TypedResults.Created($"/api/runs/{run}/races/{race}", await FindAsync(host, race!, context.RequestAborted));
    }

    private static async Task<IResult> ListAsync(string run, RunRegistry runs, CancellationToken cancel) => runs.TryFind(run, out var host)
        ? TypedResults.Ok(Page<RaceView>.Whole(await host.AskAsync<IReadOnlyList<RaceView>>(m => [.. m.Races], [], cancel)))
        : RunEndpoints.Unknown(run);

    private static async Task<IResult> GetAsync(string run, string id, RunRegistry runs, CancellationToken cancel)
    {
        if (!runs.TryFind(run, out var host)) return RunEndpoints.Unknown(run);
        return await FindAsync(host, id, cancel) is { } race ? TypedResults.Ok(race) : Problem.UnknownRace.Because($"Run {run} has no race “{id}”.", ("member", "id"));
    }

    private static async Task<IResult> StopAsync(string run, string id, HttpContext context, RunRegistry runs, RaceStart races)
    {
        if (!runs.TryFind(run, out var host)) return RunEndpoints.Unknown(run);
        var (asked, bad) = await Body.ReadAsync(context.Request, new StopRaceRequest());
        if (asked is null) return bad!;
        return (await races.StopAsync(host, id, WatchFeed.By, asked.Reason, context.RequestAborted))?.Answer()
            ?? TypedResults.Ok(await FindAsync(host, id, context.RequestAborted));
    }

    private static Task<RaceView?> FindAsync(RunHost host, string id, CancellationToken cancel) =>
        host.AskAsync(m => m.Races.FirstOrDefault(r => r.Id == id), null, cancel);
}

internal sealed record StopRaceRequest(string? Reason = null);
