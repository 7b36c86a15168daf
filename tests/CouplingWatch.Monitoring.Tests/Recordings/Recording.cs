using System.Text;
using System.Text.Json.Nodes;
using CouplingWatch.Monitoring;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;
using CouplingWatch.Testing;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Recordings;

/// <summary>A labelled recording: its records in order, and its label.</summary>
internal sealed class Recording
{
    private static readonly Lazy<JsonArray> Labels = new(() => JsonNode.Parse(File.ReadAllText(ReferenceData.Path("recordings", "labels.json")))!.AsArray());
    private static readonly Dictionary<string, IReadOnlyList<StreamRecord>> Read = [];

    private static readonly Dictionary<string, Judgement> Judged = [];

    private Recording(JsonObject label) => Label = label;

    public JsonObject Label { get; }

    public string File0 => (string)Label["file"]!;

    public string Name => File0[..File0.IndexOf('.', StringComparison.Ordinal)];

    public IReadOnlyList<StreamRecord> Records
    {
        get
        {
            lock (Read)
            {
                if (Read.TryGetValue(File0, out var known)) return known;
                var reader = new RecordReader();
                List<StreamRecord> records = [];
                long number = 0;
                foreach (var line in File.ReadLines(ReferenceData.Path("recordings", File0)))
                {
                    var result = reader.Read(Encoding.UTF8.GetBytes(line), ++number);
                    Assert.Null(result.Problem);
                    if (result.Record is { } record) records.Add(record);
                }
                return Read[File0] = records;
            }
        }
    }

    /// <summary>All, in order of name.</summary>
    public static IReadOnlyList<Recording> All => [.. Labels.Value.Select(l => new Recording(l!.AsObject()))];

    /// <param name="prefix">Such as <c>c07</c>.</param>
    public static Recording Of(string prefix) => All.Single(r => r.File0.StartsWith(prefix, StringComparison.Ordinal));

    /// <summary>The monitor after the whole recording.</summary>
    public RunMonitor Judge(MonitorOptions? options = null)
    {
        var monitor = new RunMonitor(Name, options);
        foreach (var record in Records) monitor.Observe(record, DateTimeOffset.UnixEpoch);
        monitor.EndOfRecording();
        return monitor;
    }

    /// <summary>What the default monitor says of the whole recording; judged once.</summary>
    public Judgement Judgement
    {
        get
        {
            lock (Judged)
            {
                if (Judged.TryGetValue(File0, out var known)) return known;
                var monitor = Judge();
                return Judged[File0] = new Judgement(monitor.Alerts, monitor.AdviceGiven, monitor.NotJudged, monitor.StepCount, monitor.IterationCount);
            }
        }
    }

    /// <summary>The monitor right after iteration <paramref name="iteration"/> of a step.</summary>
    public RunMonitor Until(int step, int iteration)
    {
        var monitor = new RunMonitor(Name);
        foreach (var record in Records)
        {
            monitor.Observe(record, DateTimeOffset.UnixEpoch);
            if (record is IterationRecord i && i.Step == step && i.Iteration == iteration) return monitor;
        }
        throw new ArgumentException($"{Name} has no iteration {iteration} of step {step}.");
    }

    public override string ToString() => Name;
}

internal sealed record Judgement(IReadOnlyList<Alert> Alerts, IReadOnlyList<Advice> AdviceGiven, IReadOnlyList<NotJudged> NotJudged, int StepCount, long IterationCount);
