using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Spectrum;

/// <summary>Ritz values of the pass. Shown, no alert. Level 3.</summary>
internal sealed class SpectrumCheck : ICheck
{
    public string Id => CheckIds.Spectrum;

    public NotJudged? Lacks(RunState run) => run.Basis.Groups.Count > 1
        ? new NotJudged(Id, "the run has several groups of fields, and a pass joins them", "vectors of all fields stacked, in one group")
        : BasisLack.OfVectors(run, Id);
}
