using CouplingWatch.Monitoring.State;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Basis;

/// <summary>ε₀: the threshold that suits the declared noise of the solvers.</summary>
internal static class AdvisedThreshold
{
    public const double OwnNormUndeclared = 1e-4;
    public const double PivotRatioUndeclared = 1e-6;
    public const double OwnNormTimesNoise = 100;
    public const double PivotRatioTimesNoise = 10;
    public const double OwnNormMost = 1e-2;
    public const double PivotRatioMost = 1e-4;

    /// <summary>ε₀ of a rule; the largest declared noise decides.</summary>
    public static double Of(RunState run, FilterRule rule) => (rule, run.DeclaredNoise) switch
    {
        (FilterRule.PivotRatio, { } noise) => Math.Min(PivotRatioTimesNoise * noise, PivotRatioMost),
        (FilterRule.PivotRatio, null) => PivotRatioUndeclared,
        (_, { } noise) => Math.Min(OwnNormTimesNoise * noise, OwnNormMost),
        _ => OwnNormUndeclared,
    };
}
