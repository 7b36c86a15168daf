using CouplingWatch.Monitoring;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Runs;

internal sealed partial class RunHost
{
    /// <summary>A summary this old is made anew even when nothing came, because it speaks of the time left.</summary>
    private static readonly TimeSpan SummaryAge = TimeSpan.FromSeconds(5);
    private volatile Pictured? pictured;

    /// <summary>The lane of the board; made once for any number of lookers until something changes.</summary>
    public async Task<RunSummary> SummaryAsync(CancellationToken cancel = default)
    {
        var now = around.Now();
        if (pictured is { } last && last.Version == Version && now - last.At < SummaryAge) return last.Summary;
        return await QueueAsync(async () =>
        {
            await LoadAsync(cancel);
            if (pictured is { } other && other.Version == Version && now - other.At < SummaryAge) return other.Summary;
            var summary = judge!.Ask<RunSummary?>(m => m.Summary(), null) ?? Unjudged(judge.FaultVerdict);
            pictured = new Pictured(Version, now, summary);
            return summary;
        }, cancel);
    }

    /// <summary>The run page.</summary>
    public async Task<RunDetail> DetailAsync(CancellationToken cancel = default)
    {
        return await QueueAsync(async () =>
        {
            await LoadAsync(cancel);
            return judge!.Ask<RunDetail?>(m => m.Detail(), null) ?? Unjudged(Unjudged(judge.FaultVerdict));
        }, cancel);
    }

    /// <summary>How long ago a run was heard of is told by this server's clock, not by the sender's.</summary>
    private RunSummary Received(RunSummary summary) => summary with { LastRecordAt = signs.LastReceived };

    private RunSummary Unjudged(Verdict verdict) => new()
    {
        Run = Run,
        Title = Open?.Title,
        Campaign = Open?.Campaign,
        State = Closed ? "finished" : signs.Silent ? "quiet" : "live",
        Solvers = [.. (Open?.Solvers ?? []).Select(s => s.Name)],
        Nodes = Open?.Nodes,
        Labels = Open?.Labels ?? new Dictionary<string, string>(),
        Verdict = verdict,
        AllocationEndsAt = Open?.AllocationEndsAt,
        NextSeq = sequence.Next,
        Revision = Revision,
    };

    private RunDetail Unjudged(RunSummary summary) => new()
    {
        Summary = summary,
        RestsOn = "nothing: the judgement stopped on a fault of its own",
        Settings = Open?.Settings ?? new(),
        Adjustable = Open?.Adjustable ?? new(),
        Solvers = Open?.Solvers ?? [],
        Fields = Open?.Fields ?? [],
    };

    private sealed record Pictured(long Version, DateTimeOffset At, RunSummary Summary);
}
