using CouplingWatch.Monitoring.Checks.Capped;
using CouplingWatch.Monitoring.Checks.Conditioning;
using CouplingWatch.Monitoring.Checks.Divergence;
using CouplingWatch.Monitoring.Checks.Drift;
using CouplingWatch.Monitoring.Checks.ErrorEstimate;
using CouplingWatch.Monitoring.Checks.FalseClaim;
using CouplingWatch.Monitoring.Checks.Forecast;
using CouplingWatch.Monitoring.Checks.Hang;
using CouplingWatch.Monitoring.Checks.NoiseFloor;
using CouplingWatch.Monitoring.Checks.Oscillation;
using CouplingWatch.Monitoring.Checks.Polluted;
using CouplingWatch.Monitoring.Checks.Rate;
using CouplingWatch.Monitoring.Checks.Slow;
using CouplingWatch.Monitoring.Checks.Spectrum;
using CouplingWatch.Monitoring.Checks.Stale;
using CouplingWatch.Monitoring.Checks.Stall;
using CouplingWatch.Monitoring.Checks.Start;
using CouplingWatch.Monitoring.Checks.Starved;
using CouplingWatch.Monitoring.Checks.UnequalFields;

namespace CouplingWatch.Monitoring.Checks;

/// <summary>Every check, one line each. A new check is a folder and a line here.</summary>
internal static class CheckList
{
    public static ICheck[] All(MonitorOptions options) =>
    [
        new RateCheck(),
        new ForecastCheck(),
        new DivergenceCheck(options.Divergence),
        new FalseClaimCheck(options.FalseClaim),
        new StaleCheck(options.Stale),
        new PollutedCheck(options.Polluted),
        new StarvedCheck(options.Starved),
        new OscillationCheck(options.Oscillation),
        new NoiseFloorCheck(options.Progress),
        new SlowCheck(options.Progress),
        new StallCheck(options.Progress),
        new CappedCheck(),
        new DriftCheck(options.Drift),
        new UnequalFieldsCheck(options.UnequalFields),
        new HangCheck(),
        new ConditioningCheck(),
        new SpectrumCheck(),
        new StartCheck(),
        new ErrorEstimateCheck(),
    ];
}
