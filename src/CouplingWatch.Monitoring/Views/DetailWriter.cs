using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.Checks;
using CouplingWatch.Monitoring.Checks.Polluted;
using CouplingWatch.Monitoring.Forecast;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>Writes everything the run page shows.</summary>
internal static class DetailWriter
{
    /// <summary>Updates of the step shown in "what carries the residual", the newest.</summary>
    public const int SplitsShown = 24;

    public const int LogShown = 200;

    public static RunDetail Write(RunMonitor monitor, StepPyramid pyramid, StepTrail trail, RunLog log)
    {
        var run = monitor.State;
        var summary = SummaryWriter.Write(monitor, pyramid, trail);
        return new RunDetail
        {
            Summary = summary,
            RestsOn = RestsOn(run),
            NotJudged = monitor.NotJudged,
            Checks = HealthWriter.Write(monitor),
            Settings = run.Settings,
            Adjustable = run.Open?.Adjustable ?? new(),
            Revisions = monitor.Revisions,
            Advice = monitor.Advice,
            Race = monitor.Race,
            Solvers = run.Open?.Solvers ?? [],
            Fields = [.. run.Fields.All.Select(f => f.Declared)],
            Time = run.Step.Time ?? run.LastClosed?.Time,
            TimeStep = run.TimeStep,
            EndTime = run.Open?.EndTime,
            Paths = PathWriter.Write(run, trail.Worst),
            Rate = Rate(run.Step),
            StepForecast = run.Remaining is { } remaining && run.Step is { InProgress: true, Need: { } need }
                ? new StepForecast(remaining.Iterations, remaining.Low, remaining.High, remaining.FromPaths ? "paths" : "rate", run.Step.Iteration, need)
                : null,
            Governing = [.. trail.Governing],
            Basis = monitor.Basis(),
            Condition = [.. trail.Condition],
            Split = Splits(run, monitor.Options.Polluted),
            Spectrum = monitor.Spectrum(),
            Cost = CostWriter.Write(run, trail, summary.Forecast),
            Log = log.With(monitor.Alerts, monitor.Revisions, LogShown),
        };
    }

    /// <summary>The iterations of a step that is still kept; empty otherwise.</summary>
    public static IReadOnlyList<IterationView> Iterations(RunState run, int step)
    {
        for (var t = run.Traces.Count - 1; t >= 0; t--)
        {
            var trace = run.Traces[t];
            if (trace.Step != step) continue;
            List<IterationView> views = [];
            for (var i = 0; i < trace.Count; i++)
            {
                var row = trace[i];
                Dictionary<string, double> residuals = [];
                for (var f = 0; f < trace.FieldCount && f < run.Fields.All.Count; f++)
                    if (!double.IsNaN(trace.Residual(i, f)) || double.IsNaN(row.Norm)) residuals[run.Fields.All[f].Name] = trace.Residual(i, f);
                views.Add(new IterationView(step, row.Iteration, run.SendsAttempts ? trace.Attempt : null, row.Seq, residuals, row.Norm, Known(row.Need), Known(row.Rate), Known(row.Remaining), Known(row.Relaxation), row.Done));
            }
            return views;
        }
        return [];
    }

    private static double? Known(double value) => double.IsNaN(value) ? null : value;

    private static RateEstimate? Rate(StepState step)
    {
        if (step.Z.Count < 3 || step.HasNotFinite) return null;
        var slope = Robust.Slope(step.Z, StepForecaster.RateWindow);
        return new RateEstimate(Math.Pow(10, slope.Slope), Math.Pow(10, slope.Low), Math.Pow(10, slope.High));
    }

    private static IReadOnlyList<SplitBar> Splits(RunState run, PollutedOptions promise)
    {
        List<SplitBar> bars = [];
        foreach (var group in run.Basis.Groups)
        {
            for (var i = Math.Max(0, group.Updates.Count - SplitsShown); i < group.Updates.Count; i++)
                if (Split(group.Updates[i], promise) is { } bar) bars.Add(bar);
            if (bars.Count > 0) break;
        }
        return bars;
    }

    private static SplitBar? Split(UpdateFacts facts, PollutedOptions promise)
    {
        if (double.IsNaN(facts.LiveShare) || double.IsNaN(facts.Uncovered)) return null;
        var uncovered = Math.Max(0, 1 - facts.LiveShare - facts.HistoryShare);
        var surrogate = double.IsNaN(facts.Surrogate) ? 0 : Math.Min(uncovered, facts.Surrogate * facts.Surrogate);
        double? came = double.IsNaN(facts.Came) ? null : facts.Came;
        var word = !facts.Promises(promise.PromisedBelow) ? "none-made" : came is null ? "open" : facts.Broken(promise.PromisedBelow, promise.KeptBelow) ? "broken" : "kept";
        return new SplitBar(facts.Iteration, facts.LiveShare, facts.HistoryShare, surrogate, uncovered - surrogate, facts.Uncovered, came, word);
    }

    private static string RestsOn(RunState run)
    {
        var data = run.Level switch
        {
            0 => "norms alone (level 0)",
            1 => "norms and magnitudes (level 1)",
            2 => "norms, magnitudes and the code's own basis (level 2)",
            _ => run.Basis.Groups.Any(g => g.Sketched) ? "norms, magnitudes and sketched vectors (level 3)" : "norms, magnitudes and full vectors (level 3)",
        };
        var text = $"{Say.Count(run.StepsComplete, "complete step", "complete steps")}";
        if (run.StepsCapped + run.StepsFailed is > 0 and var gaveUp) text += $" ({gaveUp} of them given up)";
        text += $", {data}";
        text += run.DeclaredNoise is { } noise ? $"; declared noise of {run.NoisiestSolver}, {Say.Power(noise)}" : "; solver noise not declared";
        if (run.Fields.Governing is { Inferred: true }) text += "; the target is inferred from what the code accepted before";
        if (run.Learning.Holds && !run.Steady) text += $". Learning since {LearningWord(run.Learning.Since)}: {run.Learning.StepsDone} of {Learning.Steps} steps";
        return text + ".";
    }

    public static string LearningWord(string since) => since switch
    {
        "applied" => "the settings changed",
        "resize" => "the interface changed its size",
        "restart" => "the restart",
        "time-step" => "the time step changed",
        _ => "the start",
    };
}
