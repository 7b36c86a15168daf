using System.Globalization;
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
    public static double Of(RunState run, FilterRule rule) => Of(run.DeclaredNoise, rule);

    /// <param name="noise">Largest declared solver noise; null when none is declared.</param>
    public static double Of(double? noise, FilterRule rule) => (rule, noise) switch
    {
        (FilterRule.PivotRatio, { } tau) => Math.Min(Plain(PivotRatioTimesNoise * tau), PivotRatioMost),
        (FilterRule.PivotRatio, null) => PivotRatioUndeclared,
        (_, { } tau) => Math.Min(Plain(OwnNormTimesNoise * tau), OwnNormMost),
        _ => OwnNormUndeclared,
    };

    /// <summary>100 · 1e-6 is to read 1e-4, not 9.999999999999999e-5.</summary>
    private static double Plain(double value) => double.Parse(value.ToString("G12", CultureInfo.InvariantCulture), CultureInfo.InvariantCulture);
}
