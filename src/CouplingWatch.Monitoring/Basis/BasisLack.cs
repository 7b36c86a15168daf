using CouplingWatch.Monitoring.State;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Basis;

/// <summary>What keeps a check of the secant basis from judging.</summary>
internal static class BasisLack
{
    /// <summary>For a check that needs level 2: what the code reports of its updates, or vectors. A method without secant columns lacks nothing: there is no basis.</summary>
    public static NotJudged? Of(RunState run, string check)
    {
        if (run.Iterations == 0) return null;
        if (run.Settings.Method is CouplingMethod.Fixed or CouplingMethod.Aitken) return null;
        if (run.Basis.ReportsSent) return null;
        if (run.Basis.Refused is { } refused) return new NotJudged(check, refused.Lack!, refused.Send);
        if (!run.Basis.VectorsSent) return new NotJudged(check, "nothing is known of the secant columns", "basis with each update (level 2), or vectors or sketches (level 3)");
        if (run.Settings.Method is null or CouplingMethod.Other) return new NotJudged(check, "it is not known how the updates are made", "settings.method, or basis with each update");
        if (run.Basis.ForeignSteps > 0) return new NotJudged(check, "columns are in use that were born before the first record", "basis with each update");
        if (run.Settings.FilterRule == FilterRule.Other) return new NotJudged(check, "the code's filter rule is its own", "basis with each update: the columns used and those left out");
        return null;
    }

    /// <summary>For what needs vectors or sketches (level 3).</summary>
    public static NotJudged? OfVectors(RunState run, string check)
    {
        if (run.Iterations == 0) return null;
        if (run.Basis.Refused is { } refused) return new NotJudged(check, refused.Lack!, refused.Send);
        return run.Basis.VectorsSent ? null : new NotJudged(check, "no vectors are sent", "vectors or sketches with each iteration (level 3)");
    }
}
