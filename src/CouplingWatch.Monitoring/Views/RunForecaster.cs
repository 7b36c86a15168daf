using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Numerics.Sequences;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>When the run ends, from its pace: seconds a step of the latest steps times the steps still to do.</summary>
internal static class RunForecaster
{
    /// <summary>Steps needed before anything is foretold.</summary>
    public const int LeastSteps = 5;

    /// <summary>The band comes from means over so many steps in a row.</summary>
    public const int BlockSteps = 5;

    /// <summary>Steps still to do, the one in progress included; null without an end time or a time step.</summary>
    public static double? StepsLeft(RunState run)
    {
        if (run.Open?.EndTime is not { } end || run.TimeStep is not { } step || !(step > 0)) return null;
        var done = run.LastClosed is { Time: { } time } ? time : run.StepsComplete * step;
        return Math.Max(0, Math.Ceiling((end - done) / step - 1e-6));
    }

    public static RunForecast? Foretell(RunState run, StepTrail trail)
    {
        if (run.Close is not null) return null;
        if (StepsLeft(run) is not { } left) return new RunForecast { Text = "No end can be foretold: the run declares no end time." };
        if (run.StepsConverged == 0 && run.UnconvergedInARow + run.Step.Received > 8) return new RunForecast { StepsLeft = left, Text = "No end can be foretold: no step has converged." };
        var seconds = trail.StepSeconds;
        if (seconds.Count < LeastSteps) return new RunForecast { StepsLeft = left, Text = $"Not known yet: {seconds.Count} of {LeastSteps} step lengths seen." };
        var pace = Pace(seconds);
        var from = trail.LastClosedAt ?? run.At;
        var ends = After(from, left * pace.Median);
        var allocation = run.Open!.AllocationEndsAt;
        double? misses = null, unfit = null;
        if (allocation is { } until)
        {
            var available = (until - from).TotalSeconds;
            misses = left == 0 ? 0 : Beyond(available / left, pace);
            unfit = pace.Median > 0 ? Math.Max(0, Math.Ceiling(left - available / pace.Median)) : 0;
        }
        return new RunForecast
        {
            Ends = ends,
            EndsEarly = After(from, left * pace.Low),
            EndsLate = After(from, left * pace.High),
            StepsLeft = left,
            StepsThatDoNotFit = unfit,
            ChanceToMiss = misses,
            Text = Sentence(ends, allocation, misses, unfit),
        };
    }

    private static string Sentence(DateTimeOffset? ends, DateTimeOffset? allocation, double? misses, double? unfit)
    {
        if (ends is not { } end) return "Beyond any allocation at this pace.";
        if (allocation is not { } until) return "No allocation end is declared.";
        var margin = Say.Seconds(Math.Abs((until - end).TotalSeconds));
        if (end > until) return $"{margin} after the allocation: about {Say.Count((int)Math.Min(unfit ?? 0, 1e9), "step", "steps")} will not fit.";
        return misses > 0.05 ? $"{margin} before the allocation; 1 chance in {Math.Max(2, Math.Round(1 / misses.Value)):0} that it misses." : $"{margin} before the allocation.";
    }

    /// <summary>Median seconds a step of the latest ten; 10 % and 90 % quantile of the means of five steps in a row.</summary>
    private static (double Median, double Low, double High, double Spread) Pace(Window seconds)
    {
        Span<double> latest = stackalloc double[StepTrail.Kept];
        var values = seconds.Latest(StepTrail.Kept, latest);
        var blocks = new List<double>();
        for (var i = 0; i + BlockSteps <= values.Length; i++)
        {
            var sum = 0.0;
            for (var j = 0; j < BlockSteps; j++) sum += values[i + j];
            blocks.Add(sum / BlockSteps);
        }
        var recent = 0.0;
        var n = Math.Min(10, values.Length);
        for (var i = values.Length - n; i < values.Length; i++) recent += values[i] / n;
        var sorted = blocks.Order().ToArray();
        var low = Math.Min(recent, Quantile.OfSorted(sorted, 0.1));
        var high = Math.Max(recent, Quantile.OfSorted(sorted, 0.9));
        return (recent, low, high, (high - low) / 2.563);
    }

    /// <summary>Chance that the pace lies above <paramref name="limit"/>, taken as normal around the present one with the spread of the band.</summary>
    private static double Beyond(double limit, (double Median, double Low, double High, double Spread) pace)
    {
        if (!(pace.Spread > 0)) return pace.Median > limit ? 1 : 0;
        return 0.5 * MathNet.Numerics.SpecialFunctions.Erfc((limit - pace.Median) / (pace.Spread * Math.Sqrt(2)));
    }

    private static DateTimeOffset? After(DateTimeOffset from, double seconds) => seconds < 3e9 ? from.AddSeconds(seconds) : null;
}
