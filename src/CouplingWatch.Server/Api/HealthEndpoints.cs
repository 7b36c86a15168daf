using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Runs;

namespace CouplingWatch.Server.Api;

/// <summary>Whether the process lives, and whether it can take records.</summary>
internal static class HealthEndpoints
{
    public static void MapHealth(this IEndpointRouteBuilder site)
    {
        site.MapGet("/healthz", () => TypedResults.Ok(new Health("alive", null))).Named("Liveness", "The process lives.").Produces<Health>();
        site.MapGet("/readyz", ReadyAsync).Named("Readiness", "The journal can be written and was read.").Produces<Health>().Faults(503, 507);
    }

    private static async Task<IResult> ReadyAsync(IJournal journal, JournalReplay replay, CancellationToken cancel)
    {
        try { await journal.CheckWritableAsync(cancel); }
        catch (JournalUnavailableException e)
        {
            return (e.NoRoom ? Problem.NoRoom : Problem.JournalDown).Because(e.Message);
        }
        return replay.Done.IsCompletedSuccessfully
            ? TypedResults.Ok(new Health("ready", null))
            : Problem.NotReady.Because($"The journal is still being read: {replay.Read} of {replay.Total} live runs.");
    }
}

internal sealed record Health(string Status, string? Detail);
