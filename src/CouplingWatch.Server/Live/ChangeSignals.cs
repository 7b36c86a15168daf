using System.Collections.Concurrent;
using System.Collections.Immutable;

namespace CouplingWatch.Server.Live;

/// <summary>Who in this process wants to be called when a run, or any run, changed. Safe for concurrent use.</summary>
internal sealed class ChangeSignals(ILogger<ChangeSignals> log)
{
    private readonly ConcurrentDictionary<string, ImmutableList<Action>> byRun = new(StringComparer.Ordinal);
    private const string AnyRun = "";

    /// <param name="run">One run, or every run when null.</param>
    public IDisposable Subscribe(string? run, Action changed)
    {
        ArgumentNullException.ThrowIfNull(changed);
        var key = run ?? AnyRun;
        byRun.AddOrUpdate(key, _ => [changed], (_, list) => list.Add(changed));
        return new Subscription(() => byRun.AddOrUpdate(key, _ => [], (_, list) => list.Remove(changed)));
    }

    public void Raise(string run)
    {
        Call(run);
        Call(AnyRun);
    }

    private void Call(string key)
    {
        if (!byRun.TryGetValue(key, out var list)) return;
        foreach (var changed in list)
        {
            try { changed(); }
            catch (Exception e) { log.LogWarning(e, "A listener of run {Run} failed", key); }
        }
    }

    private sealed class Subscription(Action end) : IDisposable
    {
        private Action? end = end;

        public void Dispose() => Interlocked.Exchange(ref end, null)?.Invoke();
    }
}
