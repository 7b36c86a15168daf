using CoupledRuns;
using CouplingWatch.Samples.Tests.Runs;
using LockGate.Cases;
using LockGate.Coupling;

namespace CouplingWatch.Samples.Tests.Gate;

internal static class Case
{
    /// <summary>Runs a case for some steps as fast as it goes.</summary>
    public static async Task<(CoupledRun Run, RecordingLink Link)> RunAsync(GateScenario scenario, int steps, RecordingLink? link = null)
    {
        link ??= new RecordingLink();
        var problem = new GateProblem(scenario.Gate, TimeProvider.System);
        var plan = scenario.Plan with { Steps = steps };
        link.Send(CoupledRun.Open(problem, plan));
        var run = new CoupledRun(problem, plan, link, TimeProvider.System);
        await run.RunAsync(TestContext.Current.CancellationToken);
        return (run, link);
    }
}
