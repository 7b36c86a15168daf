using ColdPlate.Cases;
using ColdPlate.Coupling;
using CoupledRuns;

return await SampleProgram.RunAsync(args, "plate", PlateCases.Names, name =>
{
    var scenario = PlateCases.Of(name);
    return (new PlateProblem(scenario.Plate, TimeProvider.System), scenario.Plan);
});
