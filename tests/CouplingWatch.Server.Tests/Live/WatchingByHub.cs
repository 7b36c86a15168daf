using System.Collections.Concurrent;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Http.Connections;
using Microsoft.AspNetCore.SignalR.Client;
using Microsoft.AspNetCore.TestHost;
using Microsoft.Extensions.DependencyInjection;
using static CouplingWatch.Server.Tests.RunLines;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Live;

public class WatchingByHub
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Fact]
    public async Task Who_watches_a_run_hears_its_iterations_steps_verdict_alerts_and_settings()
    {
        await using var watch = await StartAsync();
        await watch.AcceptAsync("leaf-1", Open());
        await watch.AcceptAsync("leaf-2", Open());
        await using var hub = await ConnectAsync(watch);
        var heard = Hear(hub);
        Assert.Equal(1, await hub.InvokeAsync<long>("WatchRun", "leaf-1", Cancel));

        var lines = Steps(2).Skip(1).ToList();
        await watch.AcceptAsync("leaf-2", Joined(lines));
        await watch.AcceptAsync("leaf-1", Joined(lines) + Iteration(11, 2, 0, double.NaN));
        using var put = await watch.Http.SendAsync(Api.Publishing.Put("leaf-1", 0, new { settings = new { relaxation = 0.2 }, reason = "r" }), Cancel);

        await watch.UntilAsync(() => Task.FromResult(heard.OfType<SettingsMessage>().Any()));
        Assert.All(heard, m => Assert.Equal("leaf-1", m.Run));
        Assert.Equal([(0, 0), (0, 1), (0, 2), (0, 3), (1, 0), (1, 1), (1, 2), (1, 3), (2, 0)], heard.OfType<IterationMessage>().Select(m => (m.Iteration.Step, m.Iteration.Iteration)));
        Assert.Equal([0, 1], heard.OfType<StepMessage>().Select(m => m.Step.ToStep));
        Assert.Contains(heard.OfType<AlertMessage>(), m => m.Alert is { Check: "divergence", Severity: Severity.Critical });
        Assert.Equal(1, heard.OfType<SettingsMessage>().Last().Settings.Revision);
        Assert.NotEmpty(heard.OfType<VerdictMessage>());
    }

    [Fact]
    public async Task Who_watches_the_board_hears_what_matters_of_every_run_and_no_iterations()
    {
        await using var watch = await StartAsync();
        await using var hub = await ConnectAsync(watch);
        var heard = Hear(hub);
        await hub.InvokeAsync("WatchBoard", Cancel);
        foreach (var run in new[] { "leaf-1", "leaf-2" }) await watch.AcceptAsync(run, Open() + Iteration(1, 0, 0, double.NaN));
        await watch.UntilAsync(() => Task.FromResult(heard.OfType<AlertMessage>().Select(m => m.Run).Distinct().Count() == 2));
        Assert.Empty(heard.OfType<IterationMessage>());
    }

    [Fact]
    public async Task A_run_that_is_not_there_cannot_be_watched()
    {
        await using var watch = await StartAsync();
        await using var hub = await ConnectAsync(watch);
        await Assert.ThrowsAsync<Microsoft.AspNetCore.SignalR.HubException>(() => hub.InvokeAsync<long>("WatchRun", "nobody", Cancel));
    }

    private static async Task<HubConnection> ConnectAsync(WatchUnderTest watch)
    {
        var hub = new HubConnectionBuilder()
            .WithUrl("http://localhost/hub/watch", o =>
            {
                o.Transports = HttpTransportType.LongPolling;
                o.HttpMessageHandlerFactory = _ => watch.App.GetTestServer().CreateHandler();
            })
            .AddJsonProtocol(o => WireJson.Configure(o.PayloadSerializerOptions))
            .Build();
        await hub.StartAsync(Cancel);
        return hub;
    }

    private static ConcurrentQueue<LiveMessage> Hear(HubConnection hub)
    {
        var heard = new ConcurrentQueue<LiveMessage>();
        hub.On<IterationMessage>("iteration", heard.Enqueue);
        hub.On<StepMessage>("step", heard.Enqueue);
        hub.On<VerdictMessage>("verdict", heard.Enqueue);
        hub.On<AlertMessage>("alert", heard.Enqueue);
        hub.On<AdviceMessage>("advice", heard.Enqueue);
        hub.On<SettingsMessage>("settings", heard.Enqueue);
        return heard;
    }
}
