namespace CouplingWatch.Server.Runs;

/// <summary>Has every run look at the clock now and then: silence begins without a record.</summary>
internal sealed class ClockWatch(RunRegistry runs, TimeProvider time) : BackgroundService
{
    /// <summary>How late a silence may be seen; its shortest limit is a minute.</summary>
    public static readonly TimeSpan Interval = TimeSpan.FromSeconds(5);

    protected override async Task ExecuteAsync(CancellationToken stoppingToken)
    {
        using var timer = new PeriodicTimer(Interval, time);
        try
        {
            while (await timer.WaitForNextTickAsync(stoppingToken))
            {
                foreach (var host in runs.All) host.LookAtClock();
            }
        }
        catch (OperationCanceledException) when (stoppingToken.IsCancellationRequested)
        {
        }
    }
}
