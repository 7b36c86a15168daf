using CouplingWatch.Recordings;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Examining;

/// <summary>Judges a recording as if it had been live: the items of a recording in, its examination out.</summary>
public sealed class Examiner
{
    /// <summary>Notes kept; more are counted only.</summary>
    public const int NotesKept = 20;

    private readonly RunMonitor monitor;
    private readonly List<string> notes = [];
    private readonly string file;
    private long notesDropped;

    /// <param name="file">Shown in the examination.</param>
    /// <param name="run">Name of the run; part of the ids.</param>
    public Examiner(string file, string run, MonitorOptions? options = null)
    {
        ArgumentNullException.ThrowIfNull(file);
        this.file = file;
        monitor = new RunMonitor(run, options);
    }

    /// <summary>What keeps the rest from being read; null while nothing does.</summary>
    public ExaminationProblem? Problem { get; private set; }

    public long Records { get; private set; }

    public RunMonitor Monitor => monitor;

    /// <returns>False when the recording cannot be read any further.</returns>
    public bool Take(in RecordingItem item)
    {
        if (item.Problem is { } problem)
        {
            Problem = new ExaminationProblem(problem.Line, problem.Member, problem.Expected, problem.Found, problem.Code, problem.Sentence);
            return false;
        }
        if (item.Note is { } note)
        {
            if (notes.Count < NotesKept) notes.Add($"line {item.Line}: {note.Text}");
            else notesDropped++;
        }
        if (item.Record is not { } record) return true;
        Records++;
        monitor.Observe(record, item.Received);
        return true;
    }

    /// <summary>The recording ends here.</summary>
    public Examination Finish()
    {
        if (Records == 0 && Problem is null) Problem = new ExaminationProblem(1, null, "records, the first of kind open", null, "missing-open", "line 1: expected records, the first of kind open, found nothing");
        monitor.EndOfRecording();
        if (notesDropped > 0) notes.Add($"and {notesDropped} more such places");
        return new Examination(file, monitor.Verdict, monitor.StepCount, monitor.IterationCount, monitor.Alerts, [.. monitor.AdviceGiven.OrderBy(a => a.Seq)], monitor.NotJudged) { Notes = notes, Problem = Problem };
    }

    /// <summary>Examines a recording from its items.</summary>
    public static async Task<Examination> ExamineAsync(string file, string run, IAsyncEnumerable<RecordingItem> items, MonitorOptions? options = null)
    {
        ArgumentNullException.ThrowIfNull(items);
        var examiner = new Examiner(file, run, options);
        await foreach (var item in items.ConfigureAwait(false))
            if (!examiner.Take(item)) break;
        return examiner.Finish();
    }
}
