using System.Text.Json;
using CouplingWatch.Server.Alerting;
using CouplingWatch.Server.Live;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Publishing;
using CouplingWatch.Server.Runs;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Api;

/// <summary>Alerts and what people do with them.</summary>
internal static class AlertEndpoints
{
    public static void MapAlerts(this IEndpointRouteBuilder api)
    {
        api.MapGet("/alerts", ListAsync).Named("ListAlerts", "Alerts, newest first; filters state, run and campaign.").Produces<Page<Alert>>().Faults(400);
        api.MapPost("/alerts/{id}/acknowledge", AcknowledgeAsync).Named("AcknowledgeAlert", "Somebody has it.").Produces<Alert>().Faults(404, 409);
        api.MapPost("/alerts/{id}/shelve", ShelveAsync).Named("ShelveAlert", "Put aside for some minutes, with a reason.").Takes<ShelveRequest>().Produces<Alert>().Faults(400, 404, 409);
        api.MapPost("/alerts/{id}/unshelve", UnshelveAsync).Named("UnshelveAlert", "Taken up again before its time.").Produces<Alert>().Faults(404, 409);
    }

    private static async Task<IResult> ListAsync(RunRegistry runs, string? state, string? run, string? campaign, string? after, int? limit, CancellationToken cancel)
    {
        if (Paging.Refuse(limit) is { } refusal) return refusal;
        if (state is not null && !Enum.GetNames<AlertState>().Any(s => JsonNamingPolicy.KebabCaseLower.ConvertName(s) == state) && state != "open")
            return Problem.BadQuery.Because($"“{state}” is no state of an alert.", ("member", "state"), ("expected", "open, unacknowledged, acknowledged, returned, shelved, closed"));
        if (run is not null && !runs.TryFind(run, out _)) return RunEndpoints.Unknown(run);
        var alerts = await runs.AlertsAsync(cancel);
        var ofCampaign = campaign is null ? null : runs.All.Where(h => h.Open?.Campaign == campaign).Select(h => h.Run).ToHashSet(StringComparer.Ordinal);
        var chosen = alerts.Where(a => (run is null || a.Run == run) && (ofCampaign is null || ofCampaign.Contains(a.Run)) && IsIn(a, state)).ToList();
        var passed = false;
        return TypedResults.Ok(Page<Alert>.Of(chosen, a => a.Id, after is null ? null : Behind, limit ?? Paging.Default));

        bool Behind(string id)
        {
            if (passed) return true;
            passed = id == after;
            return false;
        }
    }

    private static bool IsIn(Alert alert, string? state) => state switch
    {
        null => true,
        "open" => alert.State != AlertState.Closed,
        _ => JsonNamingPolicy.KebabCaseLower.ConvertName(alert.State.ToString()) == state,
    };

    private static async Task<IResult> AcknowledgeAsync(string id, RunRegistry runs, CancellationToken cancel) =>
        await AnswerAsync(runs, id, await runs.AcknowledgeAsync(id, WatchFeed.By, cancel), cancel);

    private static async Task<IResult> ShelveAsync(string id, HttpRequest request, RunRegistry runs, CancellationToken cancel)
    {
        var (shelf, bad) = await Body.ReadAsync<ShelveRequest>(request);
        return shelf is null ? bad! : await AnswerAsync(runs, id, await runs.ShelveAsync(id, WatchFeed.By, shelf.Minutes, shelf.Reason, cancel), cancel);
    }

    private static async Task<IResult> UnshelveAsync(string id, RunRegistry runs, CancellationToken cancel) =>
        await AnswerAsync(runs, id, await runs.UnshelveAsync(id, WatchFeed.By, cancel), cancel);

    private static async Task<IResult> AnswerAsync(RunRegistry runs, string id, Refusal? refusal, CancellationToken cancel) =>
        refusal?.Answer() ?? TypedResults.Ok((await runs.AlertsAsync(cancel)).First(a => a.Id == id));
}

internal sealed record ShelveRequest(int Minutes, string? Reason);
