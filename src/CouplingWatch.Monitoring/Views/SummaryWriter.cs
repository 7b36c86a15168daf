using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>Writes the lane of the board.</summary>
internal static class SummaryWriter
{
    /// <summary>Bars of the strip at most.</summary>
    public const int StripBars = 300;

    /// <summary>Passes of the step in progress shown at most, the newest.</summary>
    public const int PassesShown = 60;

    public static RunSummary Write(RunMonitor monitor, StepPyramid pyramid, StepTrail trail)
    {
        var run = monitor.State;
        var open = run.Open;
        var verdict = monitor.Verdict;
        var forecast = RunForecaster.Foretell(run, trail);
        var strip = pyramid.Bars(null, null, StripBars);
        var (left, stake) = Stake.Of(run, verdict, forecast, trail, Cheapest(strip));
        var advice = monitor.Advice;
        return new RunSummary
        {
            Run = monitor.Run,
            Title = open?.Title,
            Campaign = open?.Campaign,
            State = StateOf(monitor),
            Level = run.Level,
            Scheme = open?.Scheme ?? CouplingScheme.Serial,
            Solvers = [.. (open?.Solvers ?? []).Select(s => s.Name)],
            Nodes = open?.Nodes,
            Labels = open?.Labels ?? new Dictionary<string, string>(),
            Verdict = verdict,
            Step = run.Step.Step,
            Iteration = run.Step.Iteration,
            StepsComplete = run.StepsComplete,
            StepsPlanned = Planned(run),
            IterationsPerStep = Mean(run.Counts) ?? Overall(run),
            IterationsPerStepOverall = Overall(run),
            CappedSteps = run.StepsCapped + run.StepsFailed,
            Strip = strip,
            Passes = Passes(run),
            Forecast = forecast,
            AllocationEndsAt = open?.AllocationEndsAt,
            Next = advice.Count > 0 ? advice[0] : null,
            NodeHoursAtStake = stake,
            NodeHoursLeft = left,
            OpenAlerts = [.. monitor.Alerts.Where(a => a.ClosedSeq is null)],
            LastRecordAt = run.NextSeq == 0 ? null : run.At,
            NextSeq = run.NextSeq,
            Revision = run.Revision,
        };
    }

    public static string StateOf(RunMonitor monitor)
    {
        var run = monitor.State;
        if (run.Close is { } close) return close.Outcome.ToString().ToLowerInvariant();
        return run.Ended || run.Quiet ? "quiet" : "live";
    }

    public static IReadOnlyList<PassPair> Passes(RunState run)
    {
        if (run.Traces.Count == 0) return [];
        var trace = run.Trace;
        List<PassPair> passes = [];
        for (var i = Math.Max(0, trace.Count - PassesShown); i < trace.Count; i++)
        {
            ref readonly var row = ref trace[i];
            passes.Add(new PassPair(row.Iteration, double.IsNaN(row.Need) ? null : row.Need, row.Z, row.Done));
        }
        return passes;
    }

    private static int? Planned(RunState run) =>
        run.Open?.EndTime is { } end && run.Open.TimeStep is { } step && step > 0 && end / step < 1e9 ? (int)Math.Round(end / step) : null;

    private static double? Overall(RunState run) => run.StepsComplete == 0 ? null : (double)run.IterationsInSteps / run.StepsComplete;

    private static double? Mean(Window counts)
    {
        if (counts.Count == 0) return null;
        var sum = 0.0;
        for (var i = 0; i < counts.Count; i++) sum += counts[i];
        return sum / counts.Count;
    }

    /// <summary>The lowest mean of ten bars in a row: the cheapest this run has been.</summary>
    private static double? Cheapest(IReadOnlyList<StripBar> strip)
    {
        const int window = 10;
        if (strip.Count < window) return null;
        double sum = 0, least = double.PositiveInfinity;
        for (var i = 0; i < strip.Count; i++)
        {
            sum += strip[i].Median;
            if (i >= window) sum -= strip[i - window].Median;
            if (i >= window - 1) least = Math.Min(least, sum / window);
        }
        return least;
    }
}
