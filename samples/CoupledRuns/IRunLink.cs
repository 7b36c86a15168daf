using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CoupledRuns;

/// <summary>The run's line to whoever watches it. Sending never waits; the link numbers the records.</summary>
public interface IRunLink
{
    /// <summary>Hands over one record; its <c>seq</c> is set by the link.</summary>
    void Send(StreamRecord record);

    /// <summary>Newest settings revision known of; 0 as long as only the declared settings exist.</summary>
    int NewestRevision { get; }

    /// <summary>The newest settings revision, or null when it cannot be read now.</summary>
    Task<SettingsRevision?> ReadSettingsAsync(CancellationToken stop);
}
