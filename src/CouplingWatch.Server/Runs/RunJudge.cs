using CouplingWatch.Monitoring;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Runs;

/// <summary>
/// The monitor of one run behind a wall: a fault in the judgement of one run stops that judgement, says so,
/// and neither loses a record nor touches another run.
/// </summary>
internal sealed class RunJudge(string run, MonitorOptions options, ILogger log)
{
    private static readonly IReadOnlyList<Change> FaultChanged = [new(ChangeKind.Verdict)];
    private Exception? fault;
    private long faultSeq;
    private bool viewFaultSaid;

    public RunMonitor Monitor { get; } = new(run, options);

    /// <summary>True once the judgement stopped on a fault of its own.</summary>
    public bool Faulted => fault is not null;

    /// <summary>What changed; the list is reused by the next call.</summary>
    public IReadOnlyList<Change> Observe(StreamRecord record, DateTimeOffset received)
    {
        if (Faulted) return [];
        try { return Monitor.Observe(record, received); }
        catch (Exception e) { return Stop(e, record.Seq); }
    }

    public IReadOnlyList<Change> Observe(ServerEvent serverEvent, long afterSeq)
    {
        if (Faulted) return [];
        try { return Monitor.Observe(serverEvent); }
        catch (Exception e) { return Stop(e, afterSeq); }
    }

    /// <summary>Answers from the monitor, or <paramref name="otherwise"/> when the judgement stopped or the view itself has a fault.</summary>
    public T Ask<T>(Func<RunMonitor, T> question, T otherwise)
    {
        if (Faulted) return otherwise;
        try { return question(Monitor); }
        catch (Exception e) when (e is not ArgumentException)
        {
            if (!viewFaultSaid) log.LogError(e, "Run {Run}: a view of the judgement failed; further ones are not logged", run);
            viewFaultSaid = true;
            return otherwise;
        }
    }

    /// <summary>What the lane says when the judgement stopped.</summary>
    public Verdict FaultVerdict => new("not-judged", "Not judged", Faulted
        ? $"the judgement stopped on a fault of its own at record {faultSeq}; the records are still written down"
        : "the judgement could not be shown because of a fault of its own; the records are still written down");

    private IReadOnlyList<Change> Stop(Exception e, long seq)
    {
        fault = e;
        faultSeq = seq;
        log.LogError(e, "Run {Run}: the judgement stopped at record {Seq}; its records are still written down", run, seq);
        return FaultChanged;
    }
}
