using Microsoft.AspNetCore.OpenApi;
using Microsoft.OpenApi;

namespace CouplingWatch.Server.Api;

/// <summary>How a call stands in the description of the interface.</summary>
internal static class Naming
{
    public static RouteHandlerBuilder Named(this RouteHandlerBuilder call, string name, string summary) => call.WithName(name).WithSummary(summary);

    /// <summary>The statuses it may answer with a problem.</summary>
    public static RouteHandlerBuilder Faults(this RouteHandlerBuilder call, params int[] statuses)
    {
        foreach (var status in statuses) call.ProducesProblem(status);
        return call;
    }

    /// <summary>
    /// The body it takes. It only describes: whether a body is of this type is judged by the call itself, which can say what is wrong.
    /// </summary>
    public static RouteHandlerBuilder Takes<T>(this RouteHandlerBuilder call, string mediaType = "application/json") =>
        call.AddOpenApiOperationTransformer(async (operation, context, cancel) => operation.RequestBody = new OpenApiRequestBody
        {
            Required = true,
            Content = new Dictionary<string, OpenApiMediaType> { [mediaType] = new() { Schema = await context.GetOrCreateSchemaAsync(typeof(T), null, cancel) } },
        });
}
