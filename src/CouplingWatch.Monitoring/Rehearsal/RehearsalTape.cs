using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Rehearsal;

/// <summary>
/// What a rehearsal replays: the vectors of the latest complete steps of a run, taken from its records. Keeps at most
/// <see cref="MostSteps"/> steps. Not safe for concurrent use; a rehearsal works on a copy of the list.
/// </summary>
public sealed class RehearsalTape
{
    /// <summary>Window, reuse before it and enough columns for the fit.</summary>
    public const int MostSteps = 80;

    private readonly List<RecordedStep> steps = [];
    private readonly Dictionary<string, double> lastOfStepBefore = new(StringComparer.Ordinal);
    private List<VectorPair> passes = [];
    private List<IterationRecord> heads = [];
    private AppliedRecord? pending;
    private int step = -1;
    private int attempt;
    private bool open, broken, sketched, surrogate;

    /// <summary>The run's first record; null before it.</summary>
    public OpenRecord? Open { get; private set; }

    /// <summary>The settings in force.</summary>
    public CouplingSettings Settings { get; private set; } = new();

    public IReadOnlyList<FieldDeclaration> Fields { get; private set; } = [];

    /// <summary>Complete steps with vectors, oldest first.</summary>
    public IReadOnlyList<RecordedStep> Steps => steps;

    /// <summary>Takes the next record of the run.</summary>
    public void Observe(StreamRecord record)
    {
        ArgumentNullException.ThrowIfNull(record);
        switch (record)
        {
            case OpenRecord o when Open is null:
                Open = o;
                Settings = o.Settings;
                Fields = o.Fields;
                break;
            case IterationRecord iteration:
                OnIteration(iteration);
                break;
            case StepRecord s when open && s.Step == step:
                Close(s.Outcome, s.Iterations);
                break;
            case AppliedRecord { Settings: not null } applied:
                pending = applied;
                if (!open || applied.FromStep <= step) PutInForce();
                break;
            case ResizeRecord resize:
                Fields = resize.Fields;
                steps.Clear();
                broken = true;
                break;
            case SkippedRecord:
                broken = true;
                break;
        }
    }

    private void OnIteration(IterationRecord record)
    {
        var number = record.Attempt ?? 0;
        if (open && (record.Step != step || number != attempt || record.Iteration <= heads[^1].Iteration))
            Close(record.Step <= step ? StepOutcome.Rejected : null, null);
        if (!open) Begin(record, number);
        if (record.Iteration != heads.Count) broken = true;
        heads.Add(record);
        surrogate |= record.Surrogate is not null;
        if (record.Vectors is { } vectors) passes.Add(vectors);
        else if (record.Sketch is { } sketch)
        {
            passes.Add(new VectorPair(sketch.Residual, sketch.Output));
            sketched = true;
        }
    }

    private void Begin(IterationRecord record, int number)
    {
        (step, attempt, open, broken, sketched, surrogate) = (record.Step, number, true, false, false, false);
        passes = [];
        heads = [];
        if (pending is { } applied && (applied.FromStep ?? record.Step) <= record.Step) PutInForce();
    }

    private void PutInForce()
    {
        Settings = pending!.Settings!;
        pending = null;
    }

    /// <param name="outcome">Null where the code sends no verdict: converged unless it stopped at the cap.</param>
    private void Close(StepOutcome? outcome, int? iterations)
    {
        open = false;
        var verdict = outcome ?? (heads.Count >= Settings.IterationCap ? StepOutcome.Capped : StepOutcome.Converged);
        if (verdict is StepOutcome.Rejected) return;
        if (!broken && verdict is not StepOutcome.Failed && passes.Count == heads.Count && passes.Count > 0 && OneLength())
        {
            steps.Add(new RecordedStep(step, passes, iterations ?? heads.Count, verdict, Settings, Targets(), sketched, surrogate));
            if (steps.Count > MostSteps) steps.RemoveAt(0);
        }
        foreach (var (name, value) in heads[^1].Residuals) lastOfStepBefore[name] = value;
    }

    private bool OneLength()
    {
        var length = passes[0].Residual.Length;
        if (steps.Count > 0 && steps[^1].Passes[0].Residual.Length != length) steps.Clear();
        return passes.TrueForAll(p => p.Residual.Length == length && p.Output.Length == length);
    }

    /// <summary>The tolerance each unknown field had to meet at the end of the step; NaN where it is unknown.</summary>
    private double[] Targets()
    {
        var last = heads[^1];
        return [.. Fields.Where(f => f.Role == FieldRole.Unknown).Select(Target)];

        double Target(FieldDeclaration field)
        {
            if (last.Targets is { } targets && targets.TryGet(field.Name, out var target) && !double.IsNaN(target)) return target;
            var absolute = field.Absolute ?? 0;
            if (field.RelativeTo == ToleranceReference.None && field.Absolute is not null) return absolute;
            if (field.Relative is not { } relative) return field.Absolute ?? double.NaN;
            return Math.Max(absolute, relative * Reference(field));
        }

        double Reference(FieldDeclaration field)
        {
            double value;
            var known = field.RelativeTo switch
            {
                ToleranceReference.First => heads[0].Residuals.TryGet(field.Name, out value),
                ToleranceReference.PreviousStep => lastOfStepBefore.TryGetValue(field.Name, out value),
                _ => (last.Magnitudes ?? new NamedValues([], [])).TryGet(field.Name, out value),
            };
            return known ? value : double.NaN;
        }
    }
}

/// <summary>A complete step as recorded.</summary>
/// <param name="Passes">r and x̃ of every pass, unweighted, or their sketches.</param>
/// <param name="Count">Passes, as the code says.</param>
/// <param name="Targets">Tolerance of each unknown field, in order; NaN where it is unknown.</param>
public sealed record RecordedStep(
    int Step, IReadOnlyList<VectorPair> Passes, int Count, StepOutcome Outcome, CouplingSettings Settings, IReadOnlyList<double> Targets, bool Sketched, bool Surrogate)
{
    /// <summary>Residual and output of the last pass.</summary>
    public VectorPair Last => Passes[^1];
}
