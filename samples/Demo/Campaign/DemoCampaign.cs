using System.Net;
using CoupledRuns;
using CouplingWatch.Client;

namespace Demo.Campaign;

/// <summary>Computes the lanes of the demo side by side and streams them to a server, until it is stopped.</summary>
/// <param name="server">Root address of the server.</param>
/// <param name="options">Speed and lanes.</param>
/// <param name="clock">Paces the runs and the pauses.</param>
/// <param name="log">Hears what begins and ends.</param>
public sealed class DemoCampaign(Uri server, DemoOptions options, TimeProvider clock, Action<string> log)
{
    /// <summary>Runs until <paramref name="stop"/> is cancelled; the runs are closed as stopped then.</summary>
    public Task RunAsync(CancellationToken stop) => Task.WhenAll(DemoLanes.All
        .Where(lane => options.Lanes.Count == 0 || options.Lanes.Contains(lane.Key))
        .Select(lane => Task.Run(() => RunLaneAsync(lane, stop), CancellationToken.None)));

    private async Task RunLaneAsync(DemoLane lane, CancellationToken stop)
    {
        try
        {
            for (var number = await FirstFreeAsync(lane.Run, stop); !stop.IsCancellationRequested; number++)
            {
                await RunOnceAsync(lane, lane.Run + number, stop);
                await Task.Delay(TimeSpan.FromSeconds(lane.Pause / options.Speed), clock, stop);
            }
        }
        catch (OperationCanceledException) when (stop.IsCancellationRequested)
        {
            // the campaign ends here
        }
    }

    private async Task RunOnceAsync(DemoLane lane, string name, CancellationToken stop)
    {
        var (problem, plan) = lane.Make();
        plan = plan with { Pace = lane.Pace * options.Speed };
        await using var sender = RunSender.Start(server, name, CoupledRun.Open(problem, plan, TimeProvider.System.GetUtcNow()), new RunSenderOptions { Log = text => log($"{name}: {text}"), CloseTimeout = TimeSpan.FromSeconds(4) });
        log($"{name}: {plan.Title}");
        var run = new CoupledRun(problem, plan, new SenderLink(sender), clock);
        var outcome = await run.RunAsync(stop);
        log($"{name}: {outcome.ToString().ToLowerInvariant()} after {run.StepCount} steps");
    }

    /// <summary>The first number whose run the server does not know yet.</summary>
    private async Task<int> FirstFreeAsync(string beginning, CancellationToken stop)
    {
        using var http = new HttpClient { BaseAddress = server };
        for (var number = 1; ; number++)
        {
            using var answer = await http.GetAsync(new Uri($"api/runs/{beginning}{number}", UriKind.Relative), stop);
            if (answer.StatusCode == HttpStatusCode.NotFound) return number;
            answer.EnsureSuccessStatusCode();
        }
    }
}
