using ColdPlate.Cases;
using ColdPlate.Coupling;
using CoupledRuns;
using LockGate.Cases;
using LockGate.Coupling;

namespace Demo.Campaign;

/// <summary>One place of the campaign: a run, and another one after it when it has ended.</summary>
/// <param name="Key">Name on the command line.</param>
/// <param name="Run">Beginning of the names of its runs; a number follows.</param>
/// <param name="Pace">Coupling iterations a second.</param>
/// <param name="Pause">Seconds until the next run after one has ended.</param>
/// <param name="Make">A new problem with its plan.</param>
public sealed record DemoLane(string Key, string Run, double Pace, double Pause, Func<(ICoupledProblem Problem, RunPlan Plan)> Make);

/// <summary>The refit of the lock at Hollerbeck: three gate leaves and the cold plate of the drive's converter.</summary>
public static class DemoLanes
{
    /// <summary>All lanes, healthy ones first and last.</summary>
    public static IReadOnlyList<DemoLane> All { get; } =
    [
        Leaf("healthy", "hollerbeck-north-", "Hollerbeck, north leaf", "steady", 6, 40, new Booking(20_000, 2, 6)),
        Leaf("starved", "hollerbeck-south-", "Hollerbeck, south leaf", "starved", 10, 40, new Booking(24_000, 4, 5)),
        Leaf("diverging", "hollerbeck-sluice-", "Hollerbeck, sluice leaf against its new seal", "hard-seal", 5, 40, new Booking(12_000, 2, 4)),
        new DemoLane("plate", "converter-plate-", 7, 40, () =>
        {
            var scenario = PlateCases.Of("short-history");
            return (new PlateProblem(scenario.Plate, TimeProvider.System), Booked(scenario.Plan, "Converter cold plate", new Booking(18_000, 1, 8)));
        }),
    ];

    private static DemoLane Leaf(string key, string run, string title, string name, double pace, double pause, Booking booking) => new(key, run, pace, pause, () =>
    {
        var scenario = GateCases.Of(name);
        return (new GateProblem(scenario.Gate, TimeProvider.System), Booked(scenario.Plan, title, booking));
    });

    private static RunPlan Booked(RunPlan plan, string title, Booking booking) =>
        plan with { Campaign = "hollerbeck", Title = title, Steps = booking.Steps, Nodes = booking.Nodes, AllocationHours = booking.Hours };

    /// <summary>What a run is said to have been given: invented, so that the board has something to weigh.</summary>
    private sealed record Booking(int Steps, double Nodes, double Hours);
}
