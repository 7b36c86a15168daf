using CouplingWatch.Coupling;
using CouplingWatch.Records;

namespace CoupledRuns;

/// <summary>Writes a pass and the update after it as a record of the residual stream, up to level 3.</summary>
internal sealed class IterationRecords(ICoupledProblem problem, RunPlan plan)
{
    private readonly string[] fieldNames = [problem.Field.Name];
    private readonly string[] solverNames = [.. problem.Solvers.Select(s => s.Name)];

    public IterationRecord Iteration(int step, int iteration, double time, double timeStep, PassNorms norms, double[] residual, double[] output, UpdateReport? update)
    {
        var seconds = problem.SolverSeconds.ToArray();
        return new IterationRecord
        {
            Step = step,
            Iteration = iteration,
            Time = time,
            TimeStep = timeStep,
            Residuals = new NamedValues(fieldNames, [norms.Residual]),
            Magnitudes = new NamedValues(fieldNames, [norms.Output]),
            Seconds = new NamedValues(solverNames, seconds),
            PassSeconds = seconds.Sum(),
            Relaxation = update?.Relaxation,
            Worst = [Worst(residual)],
            Vectors = plan.SendVectors ? new VectorPair([.. residual], [.. output]) : null,
            Basis = plan.SendVectors && update is { } made && made.Columns.Count + made.Left.Count > 0 ? Basis(made) : null,
            Surrogate = update?.Surrogate is { } share ? new SurrogateReport(share.Iterations, problem.SurrogateSeconds, share.Covered) : null,
        };
    }

    private WorstResidual Worst(double[] residual)
    {
        var at = 0;
        for (var i = 1; i < residual.Length; i++)
            if (Math.Abs(residual[i]) > Math.Abs(residual[at])) at = i;
        return new WorstResidual(problem.Field.Name, at, residual[at], problem.PlaceOf(at));
    }

    private static BasisReport Basis(UpdateReport update) =>
        new([.. update.Columns.Select(Birth)], [.. update.Left.Select(Birth)], update.PackedR.Count > 0 ? [.. update.PackedR] : null, [.. update.Coefficients]);

    private static ColumnBirth Birth(ColumnName name) => new(name.Step, name.Iteration, name.Attempt);
}
