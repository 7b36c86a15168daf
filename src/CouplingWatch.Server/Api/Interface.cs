using CouplingWatch.Server.Intake;
using CouplingWatch.Server.Problems;

namespace CouplingWatch.Server.Api;

/// <summary>Every call of the HTTP interface.</summary>
internal static class Interface
{
    public static void MapInterface(this WebApplication app)
    {
        var api = app.MapGroup("/api").DisableAntiforgery();
        api.MapPost("/runs/{run}/records", RecordsEndpoint.PostAsync)
            .Named("PostRecords", "Takes records of a run (NDJSON); answers when they are durable.")
            .Takes<string>(RecordsEndpoint.MediaTypes[0]).Produces<RecordsAnswer>().Faults(400, 409, 413, 415, 429, 503, 507);
        api.MapRuns();
        api.MapSettings();
        api.MapAdvice();
        api.MapAlerts();
        api.MapRehearsals();
        api.MapRaces();
        api.MapExaminations();
        api.MapFallback((HttpRequest request) => Problem.NoSuchCall.Because($"There is no call {request.Method} {request.Path}.")).ExcludeFromDescription();
        app.MapHealth();
        app.MapGet("/problems/{name}", Explain).Named("ExplainProblem", "What a type of fault means.").Produces<Problem>().Faults(404);
        app.MapOpenApi("/openapi/{documentName}.json");
    }

    private static IResult Explain(string name) => Problem.ByName.TryGetValue(name, out var problem)
        ? TypedResults.Ok(problem)
        : Problem.NoSuchCall.Because($"There is no type of fault “{name}”.");
}
