using System.Net;

namespace CouplingWatch.Server.Access;

/// <summary>What counts as this machine's own address.</summary>
internal static class Loopback
{
    public static bool IsName(string host) =>
        host.Equals("localhost", StringComparison.OrdinalIgnoreCase) || (IPAddress.TryParse(host.Trim('[', ']'), out var address) && IPAddress.IsLoopback(address));
}
