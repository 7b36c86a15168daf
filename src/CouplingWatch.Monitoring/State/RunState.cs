using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.Forecast;
using CouplingWatch.Monitoring.Spectrum;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.State;

/// <summary>Everything that is known of a run at this record. Bounded: windows, the latest converged paths, the latest steps' traces.</summary>
/// <remarks>
/// Where things are, for those who write views: the open record and the settings in force here; the step in progress in <see cref="Step"/>
/// (windows, minima, need) and <see cref="Trace"/> (its iterations one by one, by field); the latest closed steps' traces in <see cref="Traces"/>;
/// the paths of the latest 20 converged steps in <see cref="Paths"/>; tolerances and norms by field in <see cref="Fields"/>; seconds in
/// <see cref="Times"/>; the hold-off in <see cref="Learning"/>. What must be kept for the whole run (pyramid, log) hangs itself in as an <see cref="IRunListener"/>.
/// </remarks>
internal sealed class RunState(string run)
{
    /// <summary>Steps whose iteration counts the checks look back on.</summary>
    public const int LatestSteps = 10;

    public string Run { get; } = run;

    public OpenRecord? Open { get; set; }

    public CloseRecord? Close { get; set; }

    /// <summary>The recording was said to end here.</summary>
    public bool Ended { get; set; }

    /// <summary>The server's clock says that no record comes; until one comes again.</summary>
    public bool Quiet { get; set; }

    /// <summary>The settings in force.</summary>
    public CouplingSettings Settings { get; set; } = new();

    /// <summary>The revision in force.</summary>
    public int Revision { get; set; }

    public bool Steady => Open?.Stepping == Stepping.Steady;

    public bool Parallel => Open?.Scheme == CouplingScheme.Parallel;

    public FieldBook Fields { get; } = new();

    public StepState Step { get; } = new();

    /// <summary>The iterations of the step in progress (or of the last one).</summary>
    public StepTrace Trace => Traces.Latest;

    /// <summary>The iterations of the latest steps and attempts, the one in progress included.</summary>
    public TraceRing Traces { get; } = new();

    public PathBook Paths { get; } = new();

    /// <summary>Secant columns, vectors and what each update rests on, by group.</summary>
    public BasisBook Basis { get; } = new();

    /// <summary>The method makes its updates with secant columns.</summary>
    public bool UsesSecants => Settings.Method is CouplingMethod.IqnIls or CouplingMethod.IqnIlsm or CouplingMethod.Mvqn;

    /// <summary>How many earlier steps lend their columns: as declared, else as reported.</summary>
    public int HistorySteps => Settings.HistorySteps ?? Basis.ReportedHistory;

    public Cadence Cadence { get; } = new();

    public SolverTimes Times { get; } = new();

    public Learning Learning { get; } = new();

    /// <summary>Iterations of the latest converged steps.</summary>
    public Window ConvergedCounts { get; } = new(LatestSteps);

    /// <summary>Iterations of the latest complete steps, converged or not.</summary>
    public Window Counts { get; } = new(LatestSteps);

    /// <summary>Iterations received.</summary>
    public long Iterations { get; set; }

    /// <summary>Steps with a verdict, rejected attempts apart.</summary>
    public int StepsComplete { get; private set; }

    public int StepsConverged { get; private set; }

    public int StepsCapped { get; private set; }

    public int StepsFailed { get; private set; }

    public int AttemptsRejected { get; private set; }

    /// <summary>Iterations spent in rejected attempts.</summary>
    public long IterationsRejected { get; private set; }

    /// <summary>Sum of the iterations of all complete steps.</summary>
    public long IterationsInSteps { get; private set; }

    public int UnconvergedInARow { get; private set; }

    /// <summary>First of the unconverged steps in a row.</summary>
    public int UnconvergedSince { get; private set; }

    /// <summary>The code sends <c>attempt</c>, or rejected a step before: alerts inside an attempt wait for its verdict.</summary>
    public bool SendsAttempts { get; set; }

    public bool SendsStepRecords { get; set; }

    public bool BeatsSeen { get; set; }

    /// <summary>The highest level of data seen: 0 residuals, 1 magnitudes, 2 basis, 3 vectors or sketch.</summary>
    public int Level { get; set; }

    /// <summary>Columns of earlier steps misled the first update of the step in progress.</summary>
    public bool Misled { get; set; }

    /// <summary>How many of the latest five steps were misled so.</summary>
    public int MisledSteps => System.Numerics.BitOperations.PopCount(misled & 31);

    /// <summary>Converged steps in a row that met neither the noise floor nor a polluted basis.</summary>
    public int SoundSteps { get; private set; }

    private uint misled;

    public ClosedStep? LastClosed { get; private set; }

    /// <summary>The newest checkpoint.</summary>
    public CheckpointRecord? Checkpoint { get; set; }

    /// <summary>Seq expected next.</summary>
    public long NextSeq { get; set; }

    /// <summary>Seq of the record in hand.</summary>
    public long Seq { get; set; } = -1;

    /// <summary>Its time: the sender's, else the receipt.</summary>
    public DateTimeOffset At { get; set; }

    /// <summary>What is worth a line in the log but no alert, since the record before; cleared with each record.</summary>
    public List<string> Notes { get; } = [];

    /// <summary>The time step that later ones are compared with, when it is sent.</summary>
    public double? TimeStep { get; set; }

    /// <summary>What the step in progress is foretold to take still; null when nothing is.</summary>
    public Remaining? Remaining { get; set; }

    /// <summary>Relaxation at work: as sent with the latest iteration that relaxed, else as set.</summary>
    public double? RelaxationInForce => RelaxationSent ?? Settings.Relaxation;

    public double? RelaxationSent { get; set; }

    /// <summary>Largest and best fixed relaxation on the directions seen, else from the growth of the residual; null when neither is known.</summary>
    /// <remarks>For the judgement only: pages work the spectrum out for themselves.</remarks>
    public RelaxationLimit? RelaxationLimit => relaxations.Of(this);

    private readonly RelaxationMemory relaxations = new();

    /// <summary>Largest declared solver noise; null when none is declared.</summary>
    public double? DeclaredNoise
    {
        get
        {
            double? largest = null;
            if (Open is null) return null;
            foreach (var solver in Open.Solvers)
                if (solver.Noise is { } noise && noise > 0 && !(noise <= largest)) largest = noise;
            return largest;
        }
    }

    /// <summary>The solver that declares it; empty when none does.</summary>
    public string NoisiestSolver
    {
        get
        {
            var largest = DeclaredNoise;
            foreach (var solver in Open?.Solvers ?? [])
                if (solver.Noise == largest && largest is not null) return solver.Name;
            return "";
        }
    }

    /// <summary>Closes the books on the step in progress.</summary>
    public void Account(in ClosedStep step)
    {
        LastClosed = step;
        Step.InProgress = false;
        if (step.Outcome == StepOutcome.Rejected)
        {
            AttemptsRejected++;
            IterationsRejected += step.Iterations;
            Fields.ForgetAttempt();
            return;
        }
        SoundSteps = step.Converged && !Basis.IsTainted(step.Ordinal) ? SoundSteps + 1 : 0;
        misled = (misled << 1) | (Misled ? 1u : 0);
        StepsComplete++;
        IterationsInSteps += step.Iterations;
        if (step.Converged)
        {
            StepsConverged++;
            UnconvergedInARow = 0;
            return;
        }
        if (step.Outcome == StepOutcome.Capped) StepsCapped++;
        else StepsFailed++;
        if (UnconvergedInARow++ == 0) UnconvergedSince = step.Step;
    }

    /// <summary>Takes a complete step into the windows later steps are compared with.</summary>
    public void Remember(in ClosedStep step)
    {
        Counts.Add(step.Iterations);
        if (!step.Converged) return;
        Fields.Accept();
        ConvergedCounts.Add(step.Iterations);
        if (step.Complete && Step.NeedsKnown && !Steady) Paths.Add(Trace);
    }

    /// <summary>Drops what earlier steps are compared by.</summary>
    public void ForgetHistory()
    {
        Paths.Clear();
        Counts.Clear();
        ConvergedCounts.Clear();
    }
}
