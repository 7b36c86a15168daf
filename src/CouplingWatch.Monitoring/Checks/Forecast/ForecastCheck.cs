using CouplingWatch.Monitoring.State;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Forecast;

/// <summary>Iterations the step in progress still takes. Shown, no alert; it needs to know how far the target is.</summary>
internal sealed class ForecastCheck : ICheck
{
    public string Id => CheckIds.Forecast;

    public NotJudged? Lacks(RunState run) => run.Iterations > 0 && run.Step.Need is null && !run.Step.HasNotFinite
        ? new NotJudged(Id, run.StepsConverged == 0 ? "the tolerance is unknown before the first converged step" : "the tolerance of a field is unknown", "magnitudes with each iteration, or targets")
        : null;
}
