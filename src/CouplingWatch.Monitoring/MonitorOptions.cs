using CouplingWatch.Monitoring.Checks;
using CouplingWatch.Monitoring.Checks.Divergence;
using CouplingWatch.Monitoring.Checks.Drift;
using CouplingWatch.Monitoring.Checks.FalseClaim;
using CouplingWatch.Monitoring.Checks.Oscillation;
using CouplingWatch.Monitoring.Checks.Polluted;
using CouplingWatch.Monitoring.Checks.Progress;
using CouplingWatch.Monitoring.Checks.Stale;
using CouplingWatch.Monitoring.Checks.Starved;
using CouplingWatch.Monitoring.Checks.UnequalFields;

namespace CouplingWatch.Monitoring;

/// <summary>The thresholds of the checks. One options object a check, each with its defaults as named constants.</summary>
public sealed class MonitorOptions
{
    public DivergenceOptions Divergence { get; init; } = new();

    /// <summary>Of slow, noise-floor and stall.</summary>
    public ProgressOptions Progress { get; init; } = new();

    public FalseClaimOptions FalseClaim { get; init; } = new();

    public OscillationOptions Oscillation { get; init; } = new();

    public PollutedOptions Polluted { get; init; } = new();

    public StaleOptions Stale { get; init; } = new();

    public StarvedOptions Starved { get; init; } = new();

    public DriftOptions Drift { get; init; } = new();

    public UnequalFieldsOptions UnequalFields { get; init; } = new();

    /// <summary>Says everything that is wrong at once.</summary>
    /// <exception cref="ArgumentException">An option lies outside its range; names each, its value and the range.</exception>
    public void Validate()
    {
        var faults = new OptionFaults();
        Divergence.Validate(faults);
        Progress.Validate(faults);
        FalseClaim.Validate(faults);
        Oscillation.Validate(faults);
        Polluted.Validate(faults);
        Stale.Validate(faults);
        Starved.Validate(faults);
        Drift.Validate(faults);
        UnequalFields.Validate(faults);
        faults.ThrowIfAny("options");
    }
}
