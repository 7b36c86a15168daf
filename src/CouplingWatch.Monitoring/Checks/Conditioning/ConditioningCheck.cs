using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.Conditioning;

/// <summary>Condition of the columns in use, as they are and with unit columns. Shown, no alert: no value of it separates good from bad. Level 2 with the triangle, or 3.</summary>
internal sealed class ConditioningCheck : ICheck
{
    public string Id => CheckIds.Conditioning;

    public NotJudged? Lacks(RunState run)
    {
        if (run.Basis.VectorsSent && run.Basis.Refused is null && run.Basis.ForeignSteps == 0) return null;
        foreach (var group in run.Basis.Groups)
            if (group.TriangleSent) return null;
        return BasisLack.Of(run, Id) ?? (run.Basis.ReportsSent ? new NotJudged(Id, "the triangle of the columns is not sent", "basis.r with each update, or vectors") : null);
    }
}
