using System.Globalization;

namespace CouplingWatch.Server.Tests;

/// <summary>
/// One server for all tests of a class, because starting one costs half a second. Each test gets a room of its own: its runs
/// <c>leaf-…</c> are called otherwise on the way to the server, so that no two tests meet.
/// </summary>
public sealed class SharedWatch : IAsyncLifetime
{
    private int rooms;
    private WatchUnderTest? server;

    public async ValueTask InitializeAsync() => server = await WatchUnderTest.StartAsync();

    internal WatchUnderTest Room() => server!.Room(string.Create(CultureInfo.InvariantCulture, $"t{Interlocked.Increment(ref rooms)}."));

    public async ValueTask DisposeAsync()
    {
        if (server is not null) await server.DisposeAsync();
    }
}

/// <summary>Puts the name of the room before the runs named in an address.</summary>
internal sealed class RoomHandler(string room, HttpMessageHandler inner) : DelegatingHandler(inner)
{
    protected override Task<HttpResponseMessage> SendAsync(HttpRequestMessage request, CancellationToken cancellationToken)
    {
        request.RequestUri = new Uri(request.RequestUri!.OriginalString.Replace("/leaf-", $"/{room}leaf-", StringComparison.Ordinal).Replace("run=leaf-", $"run={room}leaf-", StringComparison.Ordinal));
        return base.SendAsync(request, cancellationToken);
    }
}
