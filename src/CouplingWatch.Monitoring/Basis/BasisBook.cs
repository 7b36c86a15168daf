using CouplingWatch.Monitoring.State;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Basis;

/// <summary>The bases of the run, one a group, and whether its vectors can be stacked at all.</summary>
internal sealed class BasisBook
{
    private const int TaintedKept = 64;

    private readonly List<GroupBasis> groups = [];
    private readonly List<long> tainted = [];

    /// <summary>Groups that sent vectors, sketches or reports so far; a single one without a name in most runs.</summary>
    public IReadOnlyList<GroupBasis> Groups => groups;

    public bool VectorsSent { get; private set; }

    public bool ReportsSent { get; private set; }

    /// <summary>What keeps vectors that are sent from being used; null when nothing does.</summary>
    public Stacking? Refused { get; private set; }

    /// <summary>Oldest age, in steps, of a column the code said it used or left out.</summary>
    public int ReportedHistory { get; private set; }

    /// <summary>Steps for which columns born before the first record may be in use.</summary>
    public int ForeignSteps { get; set; }

    /// <summary>Cosine of the stacked residual with the one before it; NaN without vectors of both.</summary>
    public double Cosine { get; private set; } = double.NaN;

    /// <summary>A step that met the noise floor or a polluted basis says nothing of the pass.</summary>
    public bool IsTainted(long ordinal) => tainted.Contains(ordinal);

    public void Taint(long ordinal)
    {
        if (tainted.Contains(ordinal)) return;
        if (tainted.Count == TaintedKept) tainted.RemoveAt(0);
        tainted.Add(ordinal);
    }

    public GroupBasis? Find(string? group) => groups.Find(g => g.Group == group);

    public void BeginStep()
    {
        foreach (var group in groups) group.BeginStep();
    }

    public void Observe(RunState run, IterationRecord record)
    {
        if (record.Groups is { Count: > 0 } sent)
        {
            foreach (var (name, data) in sent) Observe(run, record, name, data.Vectors, data.Sketch, data.Basis);
        }
        else if (groups.Count > 0 || record.Vectors is not null || record.Sketch is not null || record.Basis is not null)
        {
            Observe(run, record, null, record.Vectors, record.Sketch, record.Basis);
        }
        double dot = 0, now = 0, before = 0;
        foreach (var group in groups)
        {
            dot += group.Dot;
            now += group.Square;
            before += group.SquareBefore;
        }
        Cosine = now > 0 && before > 0 ? dot / Math.Sqrt(now) / Math.Sqrt(before) : double.NaN;
    }

    public void StepClosed(RunState run, in ClosedStep step)
    {
        foreach (var group in groups) group.StepClosed(run, step);
        if (step.Outcome != StepOutcome.Rejected && ForeignSteps > 0) ForeignSteps--;
    }

    /// <summary>Remeshing: with mapped columns only what the code reports is judged until they have aged out.</summary>
    public void Resize(RunState run, bool mapped)
    {
        ForeignSteps = mapped ? Math.Max(1, run.HistorySteps) : 0;
        foreach (var group in groups)
        {
            group.Forget();
            group.ForeignSteps = ForeignSteps;
        }
    }

    /// <summary>The next step starts without earlier columns.</summary>
    public void DropHistory()
    {
        foreach (var group in groups) group.DropHistory();
    }

    private void Observe(RunState run, IterationRecord record, string? name, VectorPair? vectors, SketchPair? sketch, BasisReport? report)
    {
        var group = Find(name);
        if (group is null) groups.Add(group = new GroupBasis(name) { ForeignSteps = ForeignSteps });
        VectorsSent |= vectors is not null || sketch is not null;
        if (report is not null) Note(record.Step, report);
        group.BeginIteration();
        if (vectors is not null && Alike(vectors.Residual, vectors.Output))
        {
            var stacking = Stacking.Of(run.Fields, name, vectors.Residual.Length);
            Refused = stacking.Lack is null ? null : stacking;
            if (Refused is null) group.Take(run, vectors.Residual, vectors.Output, false, stacking.Stretches);
        }
        else if (sketch is not null && Alike(sketch.Residual, sketch.Output))
        {
            var stacking = Stacking.Of(run.Fields, name, null);
            Refused = stacking.Lack is null ? null : stacking;
            if (Refused is null) group.Take(run, sketch.Residual, sketch.Output, true, null);
        }
        group.Judge(run, report, run.Fields.NormOf(name), record.Relaxation is not null, record.Surrogate?.Covered ?? double.NaN);
    }

    private void Note(int step, BasisReport report)
    {
        ReportsSent = true;
        foreach (var birth in report.Columns) ReportedHistory = Math.Max(ReportedHistory, Math.Min(ColumnStore.MostColumns, step - birth.Step));
        foreach (var birth in report.Left) ReportedHistory = Math.Max(ReportedHistory, Math.Min(ColumnStore.MostColumns, step - birth.Step));
    }

    private static bool Alike(double[] residual, double[] output) => residual.Length > 0 && residual.Length == output.Length;
}
