using CouplingWatch.Monitoring.Journal;

namespace CouplingWatch.Server.Host;

/// <summary>Before anything listens: can the journal be written?</summary>
internal sealed class StartChecks(IJournal journal, WatchServerOptions options) : IHostedLifecycleService
{
    public async Task StartingAsync(CancellationToken cancellationToken)
    {
        try { await journal.CheckWritableAsync(cancellationToken); }
        catch (JournalUnavailableException e) { throw new StartException($"--data {options.Data}: the journal cannot be written: {e.Message}", e); }
    }

    public Task StartAsync(CancellationToken cancellationToken) => Task.CompletedTask;

    public Task StartedAsync(CancellationToken cancellationToken) => Task.CompletedTask;

    public Task StoppingAsync(CancellationToken cancellationToken) => Task.CompletedTask;

    public Task StopAsync(CancellationToken cancellationToken) => Task.CompletedTask;

    public Task StoppedAsync(CancellationToken cancellationToken) => Task.CompletedTask;
}
