using System.Threading.Channels;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.SignalR;

namespace CouplingWatch.Server.Live;

/// <summary>
/// Messages on their way to outside clients, in order. A run never waits for them: when clients are slower than the runs, the oldest
/// messages are dropped, and the seq in each message shows the gap.
/// </summary>
internal sealed class HubOutbox(IHubContext<WatchHub> hub, TimeProvider time, ILogger<HubOutbox> log) : BackgroundService
{
    private const int Waiting = 4096;
    private static readonly TimeSpan Patience = TimeSpan.FromSeconds(1);

    private readonly Channel<(string Group, string Method, LiveMessage Message)> messages =
        Channel.CreateBounded<(string, string, LiveMessage)>(new BoundedChannelOptions(Waiting) { SingleReader = true, FullMode = BoundedChannelFullMode.DropOldest });

    public void Put(string group, string method, LiveMessage message) => messages.Writer.TryWrite((group, method, message));

    protected override async Task ExecuteAsync(CancellationToken stoppingToken)
    {
        try
        {
            await foreach (var (group, method, message) in messages.Reader.ReadAllAsync(stoppingToken))
            {
                try { await hub.Clients.Group(group).SendAsync(method, message, stoppingToken).WaitAsync(Patience, time, stoppingToken); }
                catch (TimeoutException) { log.LogDebug("A client of {Group} takes its messages slowly", group); }
            }
        }
        catch (OperationCanceledException) when (stoppingToken.IsCancellationRequested)
        {
        }
    }
}
