using System.Globalization;
using CouplingWatch.Server.Access;

namespace CouplingWatch.Server.Host;

/// <summary>Where the server listens: loopback only, as long as it has no keys.</summary>
internal static class Binding
{
    public const string Default = "http://localhost:5080";

    /// <summary>The addresses to listen at; throws <see cref="StartException"/> naming the option when one is not this machine's own.</summary>
    public static IReadOnlyList<string> Addresses(IConfiguration configuration)
    {
        foreach (var ports in new[] { "http_ports", "https_ports" })
        {
            // These mean "every interface"; addresses override them.
            if (configuration["urls"] is null && configuration[ports] is { Length: > 0 } value)
                throw Refused($"{ports} ({value})", "every interface");
        }
        foreach (var endpoint in configuration.GetSection("Kestrel:Endpoints").GetChildren())
        {
            if (endpoint["Url"] is { } url) Check(url, $"Kestrel:Endpoints:{endpoint.Key}:Url");
        }
        var addresses = (configuration["urls"] ?? "").Split(';', StringSplitOptions.RemoveEmptyEntries | StringSplitOptions.TrimEntries);
        foreach (var address in addresses) Check(address, "--urls");
        return addresses.Length > 0 || configuration.GetSection("Kestrel:Endpoints").GetChildren().Any() ? addresses : [Default];
    }

    private static void Check(string address, string option)
    {
        BindingAddress parsed;
        try { parsed = BindingAddress.Parse(address); }
        catch (FormatException e) { throw new StartException($"{option} {address}: {e.Message}"); }
        if (parsed.IsUnixPipe || parsed.IsNamedPipe) return;
        if (!Loopback.IsName(parsed.Host)) throw Refused($"{option} {address}", parsed.Host);
    }

    private static StartException Refused(string option, string host) => new(string.Create(CultureInfo.InvariantCulture,
        $"{option} would listen on {host}; without keys this server listens on this machine only, for example --urls {Default}."));
}

/// <summary>Why the server does not start, as one line for a person.</summary>
public sealed class StartException(string message, Exception? inner = null) : Exception(message, inner);
