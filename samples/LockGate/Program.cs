using CoupledRuns;
using LockGate.Cases;
using LockGate.Coupling;

return await SampleProgram.RunAsync(args, "leaf", GateCases.Names, name =>
{
    var scenario = GateCases.Of(name);
    return (new GateProblem(scenario.Gate, TimeProvider.System), scenario.Plan);
});
