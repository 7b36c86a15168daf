using CouplingWatch.Monitoring;
using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Records;

namespace CouplingWatch.Server.Runs;

/// <summary>What every run host needs from outside.</summary>
internal sealed record RunSurroundings(IJournal Journal, IRunAudience Audience, MonitorOptions MonitorOptions, TimeProvider Time, ILogger Log)
{
    /// <summary>The server's clock in whole milliseconds, so that what is journaled reads back the same.</summary>
    public DateTimeOffset Now()
    {
        var now = Time.GetUtcNow();
        return new DateTimeOffset(now.Ticks - now.Ticks % TimeSpan.TicksPerMillisecond, TimeSpan.Zero);
    }
}

/// <summary>Who wants to hear what changed in a run. Called on the run's own turn, so it may ask the judge; it must not wait.</summary>
internal interface IRunAudience
{
    /// <param name="record">The record that changed it; null for an event.</param>
    void Hear(RunHost host, RunJudge judge, StreamRecord? record, IReadOnlyList<Change> changes);
}
