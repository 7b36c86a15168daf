namespace CouplingWatch.Monitoring;

/// <summary>The thresholds of the checks. One options object a check, each with its defaults as named constants.</summary>
public sealed class MonitorOptions
{
}
