using CouplingWatch.Coupling;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Records;

namespace CoupledRuns;

/// <summary>From the settings of the stream to those of the coupling methods.</summary>
public static class SettingsNames
{
    /// <exception cref="ArgumentException">A setting is missing or is none this loop knows.</exception>
    public static MethodSettings Method(this CouplingSettings settings)
    {
        ArgumentNullException.ThrowIfNull(settings);
        return new MethodSettings
        {
            Method = settings.Method switch
            {
                CouplingMethod.Fixed => MethodKind.Fixed,
                CouplingMethod.Aitken => MethodKind.Aitken,
                CouplingMethod.IqnIls => MethodKind.IqnIls,
                CouplingMethod.IqnIlsm => MethodKind.IqnIlsm,
                CouplingMethod.Mvqn => MethodKind.Mvqn,
                _ => throw new ArgumentException($"The method '{settings.Method}' is none this loop knows.", nameof(settings)),
            },
            FilterRule = settings.FilterRule switch
            {
                FilterRule.PivotRatio => SecantFilter.PivotRatio,
                FilterRule.OwnNorm => SecantFilter.OwnNorm,
                FilterRule.None => SecantFilter.None,
                _ => throw new ArgumentException($"The filter rule '{settings.FilterRule}' is none this loop knows.", nameof(settings)),
            },
            Relaxation = settings.Relaxation ?? throw Missing(nameof(settings.Relaxation)),
            HistorySteps = settings.HistorySteps ?? throw Missing(nameof(settings.HistorySteps)),
            FilterThreshold = settings.FilterThreshold ?? throw Missing(nameof(settings.FilterThreshold)),
        }.Checked();
    }

    private static ArgumentException Missing(string name) => new($"The settings do not state '{name}'.");

    /// <summary>Name of a filter rule as it stands in the stream.</summary>
    public static string Spelled(this FilterRule rule) => rule switch
    {
        FilterRule.PivotRatio => "pivot-ratio",
        FilterRule.OwnNorm => "own-norm",
        FilterRule.None => "none",
        _ => "other",
    };

    /// <summary>Name of a method as it stands in the stream.</summary>
    public static string Spelled(this CouplingMethod method) => method switch
    {
        CouplingMethod.Fixed => "fixed",
        CouplingMethod.Aitken => "aitken",
        CouplingMethod.IqnIls => "iqn-ils",
        CouplingMethod.IqnIlsm => "iqn-ilsm",
        CouplingMethod.Mvqn => "mvqn",
        _ => "other",
    };
}
