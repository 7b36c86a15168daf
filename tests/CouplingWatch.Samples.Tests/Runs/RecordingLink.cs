using CoupledRuns;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Samples.Tests.Runs;

/// <summary>A link that keeps what is sent and publishes revisions when a step is finished.</summary>
internal sealed class RecordingLink : IRunLink
{
    private readonly List<StreamRecord> records = [];
    private SettingsRevision? published;

    public IReadOnlyList<StreamRecord> Records => records;

    public int NewestRevision => published?.Revision ?? 0;

    /// <summary>Settings to publish once the step of that number is finished.</summary>
    public Dictionary<int, SettingsRevision> PublishAfterStep { get; } = [];

    public void Send(StreamRecord record)
    {
        records.Add(record with { Seq = records.Count });
        if (record is StepRecord step && PublishAfterStep.TryGetValue(step.Step, out var revision)) published = revision;
    }

    public Task<SettingsRevision?> ReadSettingsAsync(CancellationToken stop) => Task.FromResult(published);
}
