using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Race;

/// <summary>A made-up run with its monitor and its journal: residuals fall by a fixed factor so that a step takes the iterations it is told to.</summary>
internal sealed class MadeUpRun
{
    private const int Cap = 40;
    private readonly Func<CouplingSettings, int> count;
    private readonly List<object> journal = [];
    private readonly List<(int Revision, CouplingSettings Settings, int Due)> pending = [];
    private long seq;
    private int step;
    private int revision;

    public MadeUpRun(Func<CouplingSettings, int> count)
    {
        this.count = count;
        Send(new OpenRecord
        {
            Fields = [new FieldDeclaration { Name = "deflection", Relative = 1e-6 }],
            Settings = InForce,
            Adjustable = new AdjustableSettings { Ranges = new Dictionary<string, NumberRange> { ["historySteps"] = new(0, 40) } },
        });
    }

    public RunMonitor Monitor { get; private set; } = new("made-up");

    public CouplingSettings InForce { get; private set; } = RaceTrack.InUse;

    /// <summary>Steps between publishing and applying.</summary>
    public int Delay { get; init; }

    /// <summary>Residuals are no numbers under this history.</summary>
    public int? NotANumberUnder { get; init; }

    public void StartRace(params CouplingSettings[] challengers)
    {
        var prepared = Monitor.PrepareRace(new RaceProposal { Challengers = challengers, Seed = 3 }, "day shift", 1, DateTimeOffset.UnixEpoch);
        Assert.Null(prepared.Why);
        Observe(prepared.Event!);
    }

    /// <param name="restart">The server dies after each step and replays its journal.</param>
    public void Steps(int number, bool restart = false)
    {
        for (var i = 0; i < number; i++)
        {
            Publish();
            OneStep();
            if (restart) Monitor = Replayed();
        }
    }

    public void Send(StreamRecord record)
    {
        record = record with { Seq = seq++ };
        journal.Add(record);
        Monitor.Observe(record, DateTimeOffset.UnixEpoch);
    }

    public void Observe(ServerEvent e)
    {
        journal.Add(e);
        Monitor.Observe(e);
    }

    public RunMonitor Replayed()
    {
        var monitor = new RunMonitor("made-up");
        foreach (var entry in journal)
        {
            if (entry is StreamRecord record) monitor.Observe(record, DateTimeOffset.UnixEpoch);
            else monitor.Observe((ServerEvent)entry);
        }
        return monitor;
    }

    private void Publish()
    {
        if (Monitor.RaceWish is not { } wish) return;
        var number = ++revision;
        Observe(new PublishedEvent(number, wish.Settings, wish.Commands, "race-1", wish.Reason) { At = DateTimeOffset.UnixEpoch, Race = Monitor.Race!.Id, Arm = wish.Arm });
        pending.Add((number, wish.Settings, step + Delay));
    }

    private void OneStep()
    {
        while (pending.Count > 0 && pending[0].Due <= step)
        {
            InForce = pending[0].Settings;
            Send(new AppliedRecord { Revision = pending[0].Revision, FromStep = step, Settings = InForce });
            pending.RemoveAt(0);
        }
        var iterations = Math.Min(Cap, count(InForce));
        var converges = count(InForce) < Cap;
        var factor = Math.Pow(1e-7, 1.0 / Math.Max(1, iterations - 1));
        for (var k = 0; k < iterations; k++)
        {
            var norm = converges ? Math.Pow(factor, k) : 1 + 0.1 * Math.Cos(k);
            if (NotANumberUnder == InForce.HistorySteps && k == 3) norm = double.NaN;
            Send(new IterationRecord { Step = step, Iteration = k, Residuals = NamedValues.Of(("deflection", norm)), Magnitudes = NamedValues.Of(("deflection", 1)), PassSeconds = 2 });
        }
        var failed = NotANumberUnder == InForce.HistorySteps;
        Send(new StepRecord { Step = step++, Iterations = iterations, Outcome = failed ? StepOutcome.Rejected : converges ? StepOutcome.Converged : StepOutcome.Capped });
    }
}
