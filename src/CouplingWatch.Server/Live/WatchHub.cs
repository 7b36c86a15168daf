using CouplingWatch.Server.Runs;
using Microsoft.AspNetCore.SignalR;

namespace CouplingWatch.Server.Live;

/// <summary>
/// <c>/hub/watch</c>. A client calls <c>WatchRun(run)</c> or <c>WatchBoard()</c> and then receives <c>iteration</c>, <c>step</c>, <c>verdict</c>,
/// <c>alert</c>, <c>advice</c>, <c>settings</c> and <c>race</c>, each with the run and the seq it belongs to. The board leaves out iterations and steps.
/// </summary>
internal sealed class WatchHub(HubWatchers watchers, RunRegistry runs) : Hub
{
    public const string Address = "/hub/watch";

    /// <summary>Answers the seq expected next, so that a client knows where its picture begins.</summary>
    public async Task<long> WatchRun(string run)
    {
        if (!runs.TryFind(run, out var host)) throw new HubException($"There is no run “{run}”.");
        await Groups.AddToGroupAsync(Context.ConnectionId, run);
        watchers.Add(Context.ConnectionId, run);
        return host.NextSeq;
    }

    public async Task LeaveRun(string run)
    {
        await Groups.RemoveFromGroupAsync(Context.ConnectionId, run);
        watchers.Remove(Context.ConnectionId, run);
    }

    public async Task WatchBoard()
    {
        await Groups.AddToGroupAsync(Context.ConnectionId, HubWatchers.Board);
        watchers.Add(Context.ConnectionId, HubWatchers.Board);
    }

    public override Task OnDisconnectedAsync(Exception? exception)
    {
        watchers.RemoveAll(Context.ConnectionId);
        return base.OnDisconnectedAsync(exception);
    }
}
