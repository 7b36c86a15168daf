using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Numerics.Sequences;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.ErrorEstimate;

/// <summary>
/// How far a converged step under fixed relaxation still is from its fixed point: ρ/(1 − ρ)·‖x_k − x_{k−1}‖ with ρ from the last six increments of z.
/// An estimate, not a bound. Shown, no alert. Level 3. Source: Banach's fixed-point theorem.
/// </summary>
internal sealed class ErrorEstimateCheck : ICheck
{
    private const int Increments = 6;

    public string Id => CheckIds.ErrorEstimate;

    /// <summary>Of the latest converged step, in the unit of the stacked vector; null while there is none.</summary>
    public double? Latest { get; private set; }

    /// <summary>The largest of the run and its step.</summary>
    public (int Step, double Error)? Largest { get; private set; }

    public void StepClosed(RunState run, in ClosedStep step, List<Finding> findings)
    {
        if (run.Settings.Method != CouplingMethod.Fixed || !step.Converged || run.Basis.Groups.Count != 1 || run.Step.Z.Count < 2) return;
        var ring = run.Basis.Groups[0].Vectors;
        if (ring.Count < 2 || ring[ring.Count - 1] is not { Finite: true } now || ring[ring.Count - 2] is not { Finite: true } before || before.Ordinal != step.Ordinal || now.Ordinal != step.Ordinal) return;
        Span<double> increments = stackalloc double[Increments];
        var n = Math.Min(Increments, run.Step.Z.Count - 1);
        for (var i = 0; i < n; i++) increments[i] = run.Step.Z[i] - run.Step.Z[i + 1];
        var rate = Math.Pow(10, Quantile.Median(increments[..n]));
        if (!(rate < 1)) return;
        var squares = 0.0;
        for (var i = 0; i < now.Output.Length; i++)
        {
            var moved = now.Output[i] - now.Residual[i] - (before.Output[i] - before.Residual[i]);
            squares += moved * moved;
        }
        var error = FixedPointError.Bound(rate, Math.Sqrt(squares));
        Latest = error;
        if (!(Largest?.Error >= error)) Largest = (step.Step, error);
    }

    public NotJudged? Lacks(RunState run) => run.Settings.Method == CouplingMethod.Fixed ? BasisLack.OfVectors(run, Id) : null;
}
