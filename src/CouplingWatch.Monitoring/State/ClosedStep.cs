using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.State;

/// <summary>A step, or a rejected attempt at one, that has its verdict.</summary>
/// <param name="Seq">Of the record that closed it.</param>
/// <param name="Iterations">Passes, as the code says; else as received.</param>
/// <param name="LastNeed">y of the last iteration; null while unknown.</param>
/// <param name="LastNorm">Norm of the last iteration.</param>
/// <param name="Complete">No record of it is missing and every residual was finite.</param>
internal readonly record struct ClosedStep(
    int Step, int Attempt, long Ordinal, StepOutcome Outcome, int Iterations, double? LastNeed, double LastNorm, bool Complete,
    double? Time, double? TimeStep, long FirstSeq, long Seq, DateTimeOffset? At, int Revision)
{
    public bool Converged => Outcome == StepOutcome.Converged;

    public bool Unconverged => Outcome is StepOutcome.Capped or StepOutcome.Failed;
}
