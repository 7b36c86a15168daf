using System.Collections.Concurrent;
using System.Globalization;
using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Monitoring.Rehearsal;
using CouplingWatch.Records;
using CouplingWatch.Server.Runs;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Trials;

/// <summary>Rehearsals under way and the latest finished ones. One runs at a time; it costs a core for seconds, and no record waits for it.</summary>
internal sealed class RehearsalDesk(IJournal journal, ILogger<RehearsalDesk> log) : IAsyncDisposable
{
    private const int Kept = 50;
    private readonly SemaphoreSlim turn = new(1);
    private readonly ConcurrentDictionary<string, RehearsalJob> jobs = new(StringComparer.Ordinal);
    private readonly ConcurrentQueue<string> order = new();
    private int started;

    public RehearsalJob? Find(string run, string id) => jobs.TryGetValue(id, out var job) && job.Run == run ? job : null;

    /// <summary>Begins a rehearsal and answers at once.</summary>
    public RehearsalJob Start(RunHost host, IReadOnlyList<CouplingSettings>? candidates)
    {
        var job = new RehearsalJob(string.Create(CultureInfo.InvariantCulture, $"rehearsal-{Interlocked.Increment(ref started)}"), host.Run);
        jobs[job.Id] = job;
        order.Enqueue(job.Id);
        while (order.Count > Kept && order.TryDequeue(out var oldest) && jobs.TryRemove(oldest, out var gone)) gone.Cancel();
        job.Work = RunAsync();
        return job;

        async Task RunAsync()
        {
            try { job.Finish(await RehearseAsync(host, candidates, job, job.Cancelled)); }
            catch (OperationCanceledException) { job.Finish(null); }
            catch (Exception e)
            {
                log.LogError(e, "A rehearsal of run {Run} failed", host.Run);
                job.Fail("The rehearsal met a fault of its own; it is in the server's log.");
            }
        }
    }

    /// <summary>Rehearses and waits for it.</summary>
    /// <param name="candidates">Each only what differs from the settings in use; null: searched.</param>
    public async Task<RehearsalView> RehearseAsync(RunHost host, IReadOnlyList<CouplingSettings>? candidates, IProgress<double>? progress, CancellationToken cancel)
    {
        await turn.WaitAsync(cancel);
        try
        {
            var (tape, circumstances) = await host.ReadTapeAsync(journal, cancel);
            return await Task.Run(() => SettingsRehearsal.Prepare(tape, circumstances, cancel).Run(candidates, progress, cancel), cancel);
        }
        finally { turn.Release(); }
    }

    public async ValueTask DisposeAsync()
    {
        foreach (var job in jobs.Values) job.Cancel();
        foreach (var job in jobs.Values) await job.Work;
    }
}
