using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Start;

/// <summary>How far the start of a step lies from its end, for extrapolations of order 0, 1 and 2 (constant, 2a − b, 3a − 3b + c). Shown, no alert. Level 3.</summary>
internal sealed class StartCheck : ICheck
{
    public const int Orders = 3;

    private readonly Window[] errors = [new(RunState.LatestSteps), new(RunState.LatestSteps), new(RunState.LatestSteps)];
    private readonly List<double[]> ends = [];

    public string Id => CheckIds.Start;

    /// <summary>Median over the latest ten steps of ‖x̃ₙ − extrapolation‖, in the unit of the stacked vector; null while fewer than <paramref name="order"/> + 2 steps are known.</summary>
    public double? Error(int order) => errors[order].Count == 0 ? null : Robust.Median(errors[order], RunState.LatestSteps);

    public void Restart(RunState run, RestartCause cause)
    {
        if (cause == RestartCause.Settings) return;
        Forget();
    }

    public void StepClosed(RunState run, in ClosedStep step, List<Finding> findings)
    {
        if (run.Steady || run.Basis.Groups.Count != 1) return;
        var last = run.Basis.Groups[0].Vectors.Newest;
        if (step.Outcome == StepOutcome.Failed || last is not { Finite: true } || last.Ordinal != step.Ordinal || (ends.Count > 0 && ends[0].Length != last.Output.Length))
        {
            Forget();
            return;
        }
        for (var order = 0; order < Orders && order < ends.Count; order++) errors[order].Add(Distance(last.Output, order));
        var end = ends.Count == Orders ? ends[^1] : new double[last.Output.Length];
        if (ends.Count == Orders) ends.RemoveAt(Orders - 1);
        last.Output.CopyTo(end, 0);
        ends.Insert(0, end);
    }

    public NotJudged? Lacks(RunState run) => run.Steady ? null : BasisLack.OfVectors(run, Id);

    private double Distance(double[] reached, int order)
    {
        var squares = 0.0;
        for (var i = 0; i < reached.Length; i++)
        {
            var start = order switch
            {
                0 => ends[0][i],
                1 => 2 * ends[0][i] - ends[1][i],
                _ => 3 * ends[0][i] - 3 * ends[1][i] + ends[2][i],
            };
            squares += (reached[i] - start) * (reached[i] - start);
        }
        return Math.Sqrt(squares);
    }

    private void Forget()
    {
        ends.Clear();
        foreach (var window in errors) window.Clear();
    }
}
