using System.Text.Json;
using CouplingWatch.Server.Problems;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Api;

/// <summary>Reads a JSON body, and says which member is wrong when one is.</summary>
internal static class Body
{
    private const int Bytes = 1024 * 1024;

    /// <param name="missing">The value when there is no body; null: a body is required.</param>
    public static async Task<(T? Value, IResult? Refusal)> ReadAsync<T>(HttpRequest request, T? missing = null) where T : class
    {
        if (request.ContentLength is null or 0 && missing is not null && request.ContentType is null) return (missing, null);
        if (!request.HasJsonContentType())
            return (null, Problem.MediaType.Because($"The body comes as application/json, not as {request.ContentType ?? "a body without a type"}.", ("expected", "application/json")));
        if (request.ContentLength > Bytes) return (null, Problem.TooLarge.Because($"The body has {request.ContentLength} bytes, at most {Bytes} are taken here.", ("expected", Bytes)));
        try
        {
            var value = await JsonSerializer.DeserializeAsync<T>(request.Body, WireJson.Options, request.HttpContext.RequestAborted);
            return value is null ? (null, Problem.Malformed.Because("The body is null where an object was expected.", ("expected", "an object"))) : (value, null);
        }
        catch (JsonException e)
        {
            var member = e.Path is { Length: > 2 } path ? path[2..] : null;
            return (null, Problem.Malformed.Because(member is null ? $"The body is not the JSON expected here: {First(e.Message)}" : $"Member {member}: {First(e.Message)}", ("member", member), ("line", e.LineNumber + 1)));
        }
    }

    private static string First(string message) => message.Split(" Path:", 2)[0];
}
