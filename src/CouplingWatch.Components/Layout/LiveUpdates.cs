using CouplingWatch.Components.Feed;

namespace CouplingWatch.Components.Layout;

/// <summary>
/// Holds the pages of one browser tab calm: a page that follows the feed is refreshed at most four times a second, not at all while
/// the reader has paused or the tab is hidden, and once at the moment either ends. One instance a circuit; safe from any thread.
/// </summary>
public sealed class LiveUpdates(IWatchFeed feed, TimeProvider time)
{
    /// <summary>Least time between two refreshes of a page.</summary>
    public static readonly TimeSpan Interval = TimeSpan.FromMilliseconds(250);

    private readonly Lock gate = new();
    private readonly HashSet<Follower> followers = [];

    /// <summary>When the reader paused; null while updates come.</summary>
    public DateTimeOffset? PausedAt { get; private set; }

    /// <summary>The tab is not visible.</summary>
    public bool Hidden { get; private set; }

    /// <summary>No refresh is made now.</summary>
    public bool Held => PausedAt is not null || Hidden;

    /// <summary>Paused, resumed, hidden or shown.</summary>
    public event Action? Changed;

    public void Pause()
    {
        if (PausedAt is not null) return;
        PausedAt = time.GetUtcNow();
        Changed?.Invoke();
    }

    public void Resume()
    {
        if (PausedAt is null) return;
        PausedAt = null;
        Release();
    }

    public void SetHidden(bool hidden)
    {
        if (Hidden == hidden) return;
        Hidden = hidden;
        Release();
    }

    /// <summary>
    /// Calls <paramref name="refresh"/> after changes of <paramref name="run"/> (of the board when null), never twice at once and never
    /// faster than <paramref name="interval"/> (default <see cref="Interval"/>). Dispose to stop.
    /// </summary>
    public IDisposable Follow(string? run, Func<Task> refresh, TimeSpan? interval = null)
    {
        ArgumentNullException.ThrowIfNull(refresh);
        var follower = new Follower(this, refresh, interval ?? Interval, time);
        lock (gate) followers.Add(follower);
        follower.Listen(feed.OnChange(run, follower.Mark));
        return follower;
    }

    private void Release()
    {
        Changed?.Invoke();
        if (Held) return;
        Follower[] all;
        lock (gate) all = [.. followers];
        foreach (var follower in all) follower.Wake();
    }

    private void Forget(Follower follower)
    {
        lock (gate) followers.Remove(follower);
    }

    private sealed class Follower : IDisposable
    {
        private readonly LiveUpdates owner;
        private readonly Func<Task> refresh;
        private readonly TimeSpan interval;
        private readonly TimeProvider time;
        private readonly ITimer timer;
        private readonly Lock gate = new();
        private IDisposable? source;
        private bool dirty, scheduled, running, disposed;
        private DateTimeOffset last = DateTimeOffset.MinValue;

        public Follower(LiveUpdates owner, Func<Task> refresh, TimeSpan interval, TimeProvider time)
        {
            (this.owner, this.refresh, this.interval, this.time) = (owner, refresh, interval, time);
            timer = time.CreateTimer(_ => _ = RunAsync(), null, Timeout.InfiniteTimeSpan, Timeout.InfiniteTimeSpan);
        }

        public void Listen(IDisposable subscription)
        {
            source = subscription;
            if (disposed) subscription.Dispose();
        }

        public void Mark()
        {
            lock (gate)
            {
                dirty = true;
                Schedule();
            }
        }

        public void Wake()
        {
            lock (gate) Schedule();
        }

        private void Schedule()
        {
            if (!dirty || scheduled || running || disposed || owner.Held) return;
            scheduled = true;
            var due = last + interval - time.GetUtcNow();
            timer.Change(due > TimeSpan.Zero ? due : TimeSpan.Zero, Timeout.InfiniteTimeSpan);
        }

        private async Task RunAsync()
        {
            lock (gate)
            {
                scheduled = false;
                if (disposed || owner.Held) return;
                (dirty, running) = (false, true);
            }
            try
            {
                await refresh().ConfigureAwait(false);
            }
            catch (Exception e) when (e is ObjectDisposedException or OperationCanceledException)
            {
                // The page was left while it was being refreshed.
            }
            finally
            {
                lock (gate)
                {
                    running = false;
                    last = time.GetUtcNow();
                    Schedule();
                }
            }
        }

        public void Dispose()
        {
            lock (gate) disposed = true;
            source?.Dispose();
            timer.Dispose();
            owner.Forget(this);
        }
    }
}
