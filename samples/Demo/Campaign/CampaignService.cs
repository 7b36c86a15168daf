using Microsoft.AspNetCore.Hosting.Server;
using Microsoft.AspNetCore.Hosting.Server.Features;

namespace Demo.Campaign;

/// <summary>Starts the campaign once the server listens, and lets its runs close while the server still takes records.</summary>
internal sealed class CampaignService(DemoOptions options, IServer server, IHostApplicationLifetime life) : BackgroundService
{
    private static readonly TimeSpan LongestFarewell = TimeSpan.FromSeconds(5);

    protected override async Task ExecuteAsync(CancellationToken stoppingToken)
    {
        var started = new TaskCompletionSource();
        await using (life.ApplicationStarted.Register(started.SetResult))
        await using (life.ApplicationStopping.Register(() => started.TrySetCanceled(CancellationToken.None)))
            await started.Task;
        var address = server.Features.Get<IServerAddressesFeature>()?.Addresses.FirstOrDefault()
            ?? throw new InvalidOperationException("The server listens nowhere.");
        using var stop = new CancellationTokenSource();
        var campaign = new DemoCampaign(Reachable(address), options, TimeProvider.System, Console.WriteLine).RunAsync(stop.Token);
        // The server stops listening right after these callbacks, so the runs say goodbye inside of one.
        await using (life.ApplicationStopping.Register(() =>
        {
            stop.Cancel();
            campaign.Wait(LongestFarewell, CancellationToken.None);
        }))
            await campaign;
    }

    /// <summary>An address to call for an address that is listened on: a wildcard host is this machine.</summary>
    internal static Uri Reachable(string address)
    {
        string[] wildcards = ["://+", "://*", "://0.0.0.0", "://[::]"];
        return new Uri(wildcards.Aggregate(address, (a, w) => a.Replace(w, "://localhost", StringComparison.Ordinal)).TrimEnd('/') + "/");
    }
}
