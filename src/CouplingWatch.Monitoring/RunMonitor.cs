using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.Alerts;
using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.Checks;
using CouplingWatch.Monitoring.Spectrum;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Views;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring;

/// <summary>Judges one run: records in, findings out. Pure and deterministic; not safe for concurrent use.</summary>
public sealed partial class RunMonitor
{
    private readonly RunState state;
    private readonly SettingsBook settings = new();
    private readonly AlertBook alerts;
    private readonly AdviceBook advice;
    private readonly ICheck[] checks;
    private readonly IRunListener[] listeners;
    private readonly StepPyramid pyramid = new();
    private readonly StepTrail trail = new();
    private readonly RunLog log = new();
    private readonly List<Finding> findings = [];
    private readonly List<Change> changes = [];

    /// <param name="run">Name of the run; part of the alerts' ids.</param>
    /// <param name="options">Thresholds; the defaults when null.</param>
    /// <exception cref="ArgumentException">An option lies outside its range.</exception>
    public RunMonitor(string run, MonitorOptions? options = null)
    {
        ArgumentNullException.ThrowIfNull(run);
        Run = run;
        Options = options ?? new MonitorOptions();
        Options.Validate();
        state = new RunState(run);
        races = new Race.RaceBook(run);
        alerts = new AlertBook(run);
        advice = new AdviceBook(run);
        checks = CheckList.All(Options);
        listeners = [pyramid, trail, log];
    }

    public string Run { get; }

    public MonitorOptions Options { get; }

    internal RunState State => state;

    internal AlertBook AlertBook => alerts;

    internal SettingsBook SettingsBook => settings;

    internal IReadOnlyList<ICheck> Checks => checks;

    /// <summary>Seconds without a record after which this run counts as silent; null while fewer than five gaps are known.</summary>
    public double? SilenceLimitSeconds => state.Cadence.LimitSeconds;

    /// <summary>Seconds without a beat after which this run counts as silent; null when it declared no beats.</summary>
    public double? BeatLimitSeconds => state.Open?.BeatSeconds is { } beat && beat > 0 ? 3 * beat : null;

    /// <summary>Seconds inside <paramref name="solver"/> after which it counts as hanging.</summary>
    public double HangLimitSeconds(string solver) => state.Times.HangLimit(solver);

    /// <summary>The lane of the board.</summary>
    public RunSummary Summary() => SummaryWriter.Write(this, pyramid, trail);

    /// <summary>Everything the run page shows.</summary>
    public RunDetail Detail() => DetailWriter.Write(this, pyramid, trail, log);

    /// <summary>The secant basis after an iteration (the latest when null), also under another rule or threshold; null when it is not known or no longer kept.</summary>
    /// <exception cref="ArgumentOutOfRangeException">The threshold does not lie in 0 ≤ ε &lt; 1.</exception>
    public BasisView? Basis(int? step = null, int? iteration = null, FilterRule? rule = null, double? threshold = null) => BasisQuery.Ask(state, step, iteration, rule, threshold);

    /// <summary>Ritz values of the pass on the directions seen; null without vectors.</summary>
    public SpectrumView? Spectrum() => PassSpectrum.View(state);

    /// <summary>Per-step summaries of [from, to], thinned to at most <paramref name="points"/> groups without losing extremes.</summary>
    public IReadOnlyList<StripBar> Steps(int? from, int? to, int points) => pyramid.Bars(from, to, points);

    /// <summary>The iterations of a step with what was known as each arrived; empty when they are no longer kept.</summary>
    public IReadOnlyList<IterationView> Iterations(int step) => DetailWriter.Iterations(state, step);

    /// <summary>All alerts, open and closed, in order of seq.</summary>
    public IReadOnlyList<Alert> Alerts => alerts.All;

    /// <summary>The advice that stands now.</summary>
    public IReadOnlyList<Advice> Advice => advice.Standing;

    /// <summary>All advice given so far, the one that no longer stands included, in order of seq: what a post-mortem asks for.</summary>
    public IReadOnlyList<Advice> AdviceGiven => advice.Given;

    /// <summary>The checks that cannot judge with what this run sends, in the order of the list of checks.</summary>
    public IReadOnlyList<NotJudged> NotJudged
    {
        get
        {
            List<NotJudged> lacking = [];
            foreach (var check in checks)
                if (check.Lacks(state) is { } lack) lacking.Add(lack);
            return lacking;
        }
    }

    public Verdict Verdict => VerdictWriter.Write(this);

    public IReadOnlyList<SettingsRevision> Revisions => settings.All;

    public OpenRecord? Open => state.Open;

    /// <summary>Steps with a verdict, rejected attempts apart.</summary>
    public int StepCount => state.StepsComplete;

    public long IterationCount => state.Iterations;
}

/// <summary>Something a page or an outside client wants to hear of.</summary>
/// <param name="Kind">iteration, step, verdict, alert, advice, settings, close, race.</param>
/// <param name="Subject">The id concerned (an alert's, a revision's number); empty where the run itself is.</param>
public readonly record struct Change(ChangeKind Kind, string Subject = "");

public enum ChangeKind { Iteration, Step, Verdict, Alert, Advice, Settings, Close, Race }
