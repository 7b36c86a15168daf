using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Runs;
using CouplingWatch.Server.Trials;

namespace CouplingWatch.Server.Api;

/// <summary>Rehearsals: candidate settings replayed on recorded steps.</summary>
internal static class RehearsalEndpoints
{
    private const int MostCandidates = 500;

    public static void MapRehearsals(this IEndpointRouteBuilder api)
    {
        api.MapPost("/runs/{run}/rehearsals", StartAsync).Named("StartRehearsal", "Replays the recorded steps under candidate settings; calibration first.").Takes<RehearsalRequest>().Produces<RehearsalStatus>(202).Faults(400, 404);
        api.MapGet("/runs/{run}/rehearsals/{id}", Get).Named("GetRehearsal", "How far it is, and what it found.").Produces<RehearsalStatus>().Faults(404);
        api.MapDelete("/runs/{run}/rehearsals/{id}", Cancel).Named("CancelRehearsal", "Stops it.").Produces(204).Faults(404);
    }

    private static async Task<IResult> StartAsync(string run, HttpRequest request, RunRegistry runs, RehearsalDesk desk)
    {
        if (!runs.TryFind(run, out var host)) return RunEndpoints.Unknown(run);
        var (asked, bad) = await Body.ReadAsync(request, new RehearsalRequest());
        if (asked is null) return bad!;
        if (asked.Candidates?.Count > MostCandidates)
            return Problem.Malformed.Because($"{asked.Candidates.Count} candidates; at most {MostCandidates} are rehearsed at once.", ("member", "candidates"), ("expected", $"at most {MostCandidates}"));
        var job = desk.Start(host, asked.Candidates is { Count: > 0 } candidates ? candidates : null);
        return TypedResults.Accepted($"/api/runs/{run}/rehearsals/{job.Id}", job.Status);
    }

    private static IResult Get(string run, string id, RehearsalDesk desk) => desk.Find(run, id) is { } job ? TypedResults.Ok(job.Status) : Unknown(run, id);

    private static IResult Cancel(string run, string id, RehearsalDesk desk)
    {
        if (desk.Find(run, id) is not { } job) return Unknown(run, id);
        job.Cancel();
        return TypedResults.NoContent();
    }

    private static IResult Unknown(string run, string id) => Problem.UnknownRehearsal.Because($"Run {run} has no rehearsal “{id}”, or it is no longer kept.", ("member", "id"));
}
