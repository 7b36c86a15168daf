namespace CouplingWatch.Server.Runs;

/// <summary>
/// After a start: derives the live runs from the journal, then the closed ones one by one behind them. Asking for a run reads it at once,
/// so nobody waits for the others.
/// </summary>
internal sealed class JournalReplay(RunRegistry runs, ILogger<JournalReplay> log) : BackgroundService
{
    private readonly TaskCompletionSource done = new(TaskCreationOptions.RunContinuationsAsynchronously);

    /// <summary>Ends when every live run was read.</summary>
    public Task Done => done.Task;

    public int Read { get; private set; }

    public int Total { get; private set; }

    protected override async Task ExecuteAsync(CancellationToken stoppingToken)
    {
        try
        {
            var live = await runs.FindJournaledAsync(stoppingToken);
            Total = live.Count;
            foreach (var host in live)
            {
                await LoadAsync(host, stoppingToken);
                Read++;
            }
            done.TrySetResult();
            foreach (var host in runs.All.Except(live)) await LoadAsync(host, stoppingToken);
        }
        catch (OperationCanceledException) when (stoppingToken.IsCancellationRequested)
        {
            done.TrySetCanceled(stoppingToken);
        }
        catch (Exception e)
        {
            log.LogError(e, "The journal could not be read at the start; runs are read as they are asked for");
            done.TrySetException(e);
        }
    }

    private async Task LoadAsync(RunHost host, CancellationToken cancel)
    {
        try { await host.SummaryAsync(cancel); }
        catch (Exception e) when (e is not OperationCanceledException) { log.LogError(e, "Run {Run} could not be read from the journal", host.Run); }
    }
}
