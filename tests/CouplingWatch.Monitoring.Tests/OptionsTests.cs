using CouplingWatch.Monitoring;
using CouplingWatch.Monitoring.Checks.Divergence;
using CouplingWatch.Monitoring.Checks.Stale;

namespace CouplingWatch.Monitoring.Tests;

public sealed class OptionsTests
{
    [Fact]
    public void The_defaults_are_valid() => new MonitorOptions().Validate();

    [Fact]
    public void Everything_that_is_wrong_is_said_at_once()
    {
        var options = new MonitorOptions { Divergence = new DivergenceOptions { FirstIteration = 0, SlopeWindow = 99 }, Stale = new StaleOptions { Steps = 4, Within = 3 } };
        var thrown = Assert.Throws<ArgumentException>(() => new RunMonitor("x", options));
        Assert.StartsWith("Divergence.FirstIteration is 0; it must lie in 1…1000; Divergence.SlopeWindow is 99; it must lie in 2…16; Stale.Within is 3; it must lie in 4…16.", thrown.Message, StringComparison.Ordinal);
    }
}
