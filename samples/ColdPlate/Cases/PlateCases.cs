using ColdPlate.Coupling;
using ColdPlate.Layers;
using CoupledRuns;
using CouplingWatch.Records;

namespace ColdPlate.Cases;

/// <summary>A problem and the way it is run.</summary>
/// <param name="Plate">The problem.</param>
/// <param name="Plan">Settings, length, pace.</param>
public sealed record PlateScenario(PlateCase Plate, RunPlan Plan);

/// <summary>Named cold-plate cases.</summary>
public static class PlateCases
{
    /// <summary>Settings under which the plate is well behaved.</summary>
    public static CouplingSettings Sound { get; } = new()
    {
        Method = CouplingMethod.IqnIls,
        Relaxation = 0.1,
        HistorySteps = 12,
        FilterRule = FilterRule.OwnNorm,
        FilterThreshold = 1e-8,
        IterationCap = 40,
        PredictorOrder = 1,
    };

    private static readonly Dictionary<string, (string What, Func<PlateScenario> Make)> Named = new()
    {
        ["steady"] = ("roles the wrong way round (rates −17 to −13), yet well set", () => Scenario("Cold plate, four heaters", new PlateCase(), Sound)),
        ["short-history"] = ("the same with four steps of history: a few iterations more", () => Scenario("Cold plate, short history", new PlateCase(), Sound with { HistorySteps = 4 })),
        ["patient"] = ("fixed relaxation near the best one", () => Scenario("Cold plate, fixed relaxation", new PlateCase(), Sound with { Method = CouplingMethod.Fixed, Relaxation = 0.055 })),
        ["weak"] = ("roles the right way round: the plain iteration converges by itself",
            () => Scenario("Cold plate, weak coupling", new PlateCase { Coolant = new LayerMaterial(0.6, 4.2e6), Plate = new LayerMaterial(200, 2.4e6), Velocity = 0.005 },
                Sound with { Method = CouplingMethod.Fixed, Relaxation = 1 })),
    };

    /// <summary>Names of the cases with what each shows.</summary>
    public static IReadOnlyDictionary<string, string> Names { get; } = Named.ToDictionary(n => n.Key, n => n.Value.What);

    /// <summary>A case by name.</summary>
    /// <exception cref="ArgumentException">No case has that name.</exception>
    public static PlateScenario Of(string name) => Named.TryGetValue(name, out var found)
        ? found.Make()
        : throw new ArgumentException($"No case is named '{name}'; there are {string.Join(", ", Named.Keys)}.", nameof(name));

    private static PlateScenario Scenario(string title, PlateCase plate, CouplingSettings settings) => new(plate, new RunPlan
    {
        Campaign = "cold-plate",
        Title = title,
        Settings = settings,
        TimeStep = plate.TimeStep,
    });
}
