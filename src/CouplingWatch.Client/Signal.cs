namespace CouplingWatch.Client;

/// <summary>Wakes one waiter; a signal given while nobody waits is kept.</summary>
internal sealed class Signal
{
    private readonly SemaphoreSlim semaphore = new(0, 1);
    private readonly Lock gate = new();

    public void Set()
    {
        lock (gate)
        {
            if (semaphore.CurrentCount == 0) semaphore.Release();
        }
    }

    /// <summary>Waits for a signal, at most so long (null: without end). True when it was signalled.</summary>
    public async Task<bool> WaitAsync(TimeSpan? longest, TimeProvider time, CancellationToken cancel)
    {
        if (longest is not { } limit)
        {
            await semaphore.WaitAsync(cancel).ConfigureAwait(false);
            return true;
        }
        using var timeout = new CancellationTokenSource(limit, time);
        using var either = CancellationTokenSource.CreateLinkedTokenSource(cancel, timeout.Token);
        try
        {
            await semaphore.WaitAsync(either.Token).ConfigureAwait(false);
            return true;
        }
        catch (OperationCanceledException) when (!cancel.IsCancellationRequested)
        {
            return false;
        }
    }
}
