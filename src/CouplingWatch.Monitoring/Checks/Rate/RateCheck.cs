namespace CouplingWatch.Monitoring.Checks.Rate;

/// <summary>Factor an iteration, from the slope of the last six z. Shown, no alert; level 0, so it never lacks anything.</summary>
internal sealed class RateCheck : ICheck
{
    public string Id => CheckIds.Rate;
}
