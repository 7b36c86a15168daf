using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring;

/// <summary>Judges one run: records in, findings out. Pure and deterministic; not safe for concurrent use.</summary>
public sealed class RunMonitor
{
    public RunMonitor(string run, MonitorOptions? options = null)
    {
        Run = run;
        Options = options ?? new MonitorOptions();
    }

    public string Run { get; }

    public MonitorOptions Options { get; }

    /// <summary>Handles the next record. The returned list is reused by the next call.</summary>
    /// <param name="received">When the server received it; used where the record carries no time.</param>
    public IReadOnlyList<Change> Observe(StreamRecord record, DateTimeOffset received) => throw new NotImplementedException();

    /// <summary>Handles what the server saw by its clock or what a person did.</summary>
    public IReadOnlyList<Change> Observe(ServerEvent serverEvent) => throw new NotImplementedException();

    /// <summary>The recording ends here: silence may be judged.</summary>
    public IReadOnlyList<Change> EndOfRecording() => throw new NotImplementedException();

    /// <summary>Seconds without a record after which this run counts as silent; null while fewer than five gaps are known.</summary>
    public double? SilenceLimitSeconds => throw new NotImplementedException();

    public RunSummary Summary(DateTimeOffset now) => throw new NotImplementedException();

    public RunDetail Detail(DateTimeOffset now) => throw new NotImplementedException();

    public BasisView? Basis(int? step = null, int? iteration = null, FilterRule? rule = null, double? threshold = null) => throw new NotImplementedException();

    public SpectrumView? Spectrum() => throw new NotImplementedException();

    /// <summary>Per-step summaries of [from, to], thinned to at most <paramref name="points"/> groups without losing extremes.</summary>
    public IReadOnlyList<StripBar> Steps(int? from, int? to, int points) => throw new NotImplementedException();

    public IReadOnlyList<IterationView> Iterations(int step) => throw new NotImplementedException();

    /// <summary>All alerts, open and closed, in order of seq.</summary>
    public IReadOnlyList<Alert> Alerts => throw new NotImplementedException();

    public IReadOnlyList<Advice> Advice => throw new NotImplementedException();

    public IReadOnlyList<NotJudged> NotJudged => throw new NotImplementedException();

    public Verdict Verdict => throw new NotImplementedException();

    public IReadOnlyList<SettingsRevision> Revisions => throw new NotImplementedException();

    public OpenRecord? Open => throw new NotImplementedException();

    public int StepCount => throw new NotImplementedException();

    public long IterationCount => throw new NotImplementedException();
}

/// <summary>Something a page or an outside client wants to hear of.</summary>
/// <param name="Kind">iteration, step, verdict, alert, advice, settings, close, race.</param>
/// <param name="Subject">The id concerned (an alert's, a revision's number); empty where the run itself is.</param>
public readonly record struct Change(ChangeKind Kind, string Subject = "");

public enum ChangeKind { Iteration, Step, Verdict, Alert, Advice, Settings, Close, Race }
