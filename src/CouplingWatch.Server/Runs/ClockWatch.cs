namespace CouplingWatch.Server.Runs;

/// <summary>Has every run look at the clock now and then: silence begins without a record.</summary>
internal sealed class ClockWatch(RunRegistry runs, TimeProvider time, ILogger<ClockWatch> log) : BackgroundService
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
                foreach (var host in runs.All)
                {
                    try { await host.LookAtClockAsync(stoppingToken); }
                    catch (Exception e) when (e is not OperationCanceledException) { log.LogWarning(e, "Run {Run}: what its clock says could not be written down", host.Run); }
                }
            }
        }
        catch (OperationCanceledException) when (stoppingToken.IsCancellationRequested)
        {
        }
    }
}
