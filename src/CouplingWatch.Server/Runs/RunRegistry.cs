using System.Collections.Concurrent;
using System.Diagnostics.CodeAnalysis;
using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;

namespace CouplingWatch.Server.Runs;

/// <summary>All runs by name. A run stands here from its first accepted record on.</summary>
internal sealed class RunRegistry(RunSurroundings around) : IAsyncDisposable
{
    private readonly ConcurrentDictionary<string, Lazy<RunHost>> hosts = new(StringComparer.Ordinal);

    public RunSurroundings Around => around;

    /// <summary>Every run that has records, by name.</summary>
    public IReadOnlyList<RunHost> All => [.. hosts.Values.Select(h => h.Value).Where(h => h.Begun).OrderBy(h => h.Run, StringComparer.Ordinal)];

    public bool TryFind(string run, [NotNullWhen(true)] out RunHost? host)
    {
        host = hosts.TryGetValue(run, out var found) && found.Value.Begun ? found.Value : null;
        return host is not null;
    }

    /// <summary>The host of a run that exists or is about to begin.</summary>
    public RunHost Begin(string run) => Host(run, journaled: false);

    private RunHost Host(string run, bool journaled) => hosts.GetOrAdd(run, name => new Lazy<RunHost>(() => new RunHost(name, around, journaled))).Value;

    /// <summary>Stands up a host for every run of the journal; answers which of them are still open.</summary>
    public async Task<IReadOnlyList<RunHost>> FindJournaledAsync(CancellationToken cancel)
    {
        var live = new List<RunHost>();
        foreach (var run in await around.Journal.RunsAsync(cancel))
        {
            if (run.NextSeq == 0) continue;
            var host = Host(run.Run, journaled: true);
            if (!await IsClosedAsync(run, cancel)) live.Add(host);
        }
        return live;
    }

    private async Task<bool> IsClosedAsync(JournaledRun run, CancellationToken cancel) =>
        await around.Journal.FindAsync(run.Run, run.NextSeq - 1, cancel) is { } last
        && new RecordReader().Read(last.Body.Span).Record is CloseRecord;

    public async ValueTask DisposeAsync()
    {
        foreach (var host in hosts.Values) await host.Value.DisposeAsync();
    }
}
