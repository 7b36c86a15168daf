using CouplingWatch.Server.Problems;

namespace CouplingWatch.Server.Access;

/// <summary>
/// While the server has no keys, whoever reaches it is an operator. So that a page of another site in the same browser does not reach it,
/// what a browser sends from another origin is refused, and so is a host name that is not this machine's own.
/// </summary>
internal static class OwnSiteOnly
{
    public static void UseOwnSiteOnly(this IApplicationBuilder app) => app.Use((context, next) =>
    {
        if (!Loopback.IsName(context.Request.Host.Host))
            return Problem.CrossOrigin.Because($"This server answers as localhost, not as “{context.Request.Host.Host}”.", ("member", "Host")).ExecuteAsync(context);
        var origin = context.Request.Headers.Origin.ToString();
        return origin.Length == 0 || IsOwn(origin, context.Request)
            ? next(context)
            : Problem.CrossOrigin.Because($"The request comes from {origin}, not from this server's own pages.", ("member", "Origin")).ExecuteAsync(context);
    });

    private static bool IsOwn(string origin, HttpRequest request) =>
        Uri.TryCreate(origin, UriKind.Absolute, out var from) && from.Scheme == request.Scheme
        && from.Host.Equals(request.Host.Host, StringComparison.OrdinalIgnoreCase) && from.Port == (request.Host.Port ?? (request.IsHttps ? 443 : 80));
}
