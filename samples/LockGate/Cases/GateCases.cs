using CoupledRuns;
using CouplingWatch.Records;
using LockGate.Coupling;
using LockGate.Leaf;
using LockGate.Loads;
using LockGate.Water;

namespace LockGate.Cases;

/// <summary>A problem and the way it is run.</summary>
/// <param name="Gate">The problem.</param>
/// <param name="Plan">Settings, length, pace.</param>
public sealed record GateScenario(GateCase Gate, RunPlan Plan);

/// <summary>Named lock-gate cases, each of which shows one phenomenon of coupled runs.</summary>
public static class GateCases
{
    /// <summary>A busy lock: short nudges low and high on the leaf, wash of small craft.</summary>
    public static IReadOnlyList<IGateLoad> Busy { get; } =
    [
        new VesselNudge(4e3, 8, 0.4, 0.02, 0.03, 0.11),
        new VesselNudge(-3e3, 10.5, 0.3, 0.05, 0.04, 0.13),
        new Wash(800, 12, [0.31, 0.17, 0.83]),
    ];

    /// <summary>The same lock on a quieter day: stronger nudges, further apart.</summary>
    public static IReadOnlyList<IGateLoad> Quiet { get; } =
    [
        new VesselNudge(8e3, 8, 0.5, 0.05, 0.05, 0.31),
        new VesselNudge(-6e3, 10.5, 0.4, 0.11, 0.07, 0.43),
        new Wash(800, 12, [0.31, 0.17, 0.83]),
    ];

    /// <summary>Settings under which the leaf is well behaved: IQN-ILS, four steps of history, own-norm 1e-4.</summary>
    public static CouplingSettings Sound { get; } = new()
    {
        Method = CouplingMethod.IqnIls,
        Relaxation = 0.1,
        HistorySteps = 4,
        FilterRule = FilterRule.OwnNorm,
        FilterThreshold = 1e-4,
        IterationCap = 40,
        PredictorOrder = 1,
    };

    private static readonly GroundMotion Tremor = new(1.5, [3.1, 7.3, 13.7, 22.9], 0.9);

    private static readonly Dictionary<string, (string What, Func<GateScenario> Make)> Named = new()
    {
        ["steady"] = ("a light leaf, well set: about 4 iterations a step", () => Scenario("North leaf, steady traffic", new GateCase { Loads = Busy }, Sound)),
        ["starved"] = ("pivot-ratio 1e-2 leaves the newest columns out: about 10 iterations a step instead of 4",
            () => Scenario("North leaf, strict filter", new GateCase { Loads = Quiet, GapDrag = 60 }, Sound with { FilterRule = FilterRule.PivotRatio, FilterThreshold = 1e-2 })),
        ["diverging"] = ("fixed relaxation above the limit of 0.197: the first step already diverges",
            () => Scenario("North leaf, fixed relaxation", new GateCase { Loads = Quiet }, Sound with { Method = CouplingMethod.Fixed, Relaxation = 0.25, IterationCap = 80 })),
        ["sawtooth"] = ("fixed relaxation just below the limit: the residual alternates",
            () => Scenario("North leaf, fixed relaxation 0.19", new GateCase { Loads = Busy }, Sound with { Method = CouplingMethod.Fixed, Relaxation = 0.19, IterationCap = 45 })),
        ["crawl"] = ("fixed relaxation far too small",
            () => Scenario("North leaf, fixed relaxation 0.02", new GateCase { Loads = Busy }, Sound with { Method = CouplingMethod.Fixed, Relaxation = 0.02, IterationCap = 50 })),
        ["polluted"] = ("noise that differs from pass to pass spoils a basis that keeps everything; own-norm 1e-2 cures it",
            () => Scenario("South leaf, tremor", new GateCase { Ground = Tremor, InnerTolerance = 1e-6, Relative = 1e-6 },
                Sound with { FilterThreshold = 1e-11, HistorySteps = 2, IterationCap = 20 })),
        ["repeated-noise"] = ("a coarse inner solve that repeats its error does no harm",
            () => Scenario("South leaf, coarse inner solve", new GateCase { Ground = Tremor, InnerTolerance = 3e-4, WarmStart = WarmStart.StepStart, Relative = 1e-6 },
                Sound with { FilterThreshold = 1e-2, HistorySteps = 2 })),
        ["seal"] = ("the leaf touches a soft seal",
            () => Scenario("North leaf, soft seal", new GateCase { Loads = Quiet, Seal = new SealContact(11, 4e-4, 1e7, 1e-4) }, Sound)),
        ["hard-seal"] = ("the leaf meets a hard seal in motion: steps do not converge",
            () => Scenario("North leaf, hard seal", new GateCase { Loads = Quiet, Seal = new SealContact(11, 8e-4, 3e9, 1e-6) },
                Sound with { FilterRule = FilterRule.PivotRatio, FilterThreshold = 1e-8, IterationCap = 25 })),
        ["stale"] = ("the time step grows sixfold in mid-run and ten steps of history are wrong",
            () => Longer(30, 6, Scenario("North leaf, longer steps", new GateCase { Loads = Busy }, Sound with { HistorySteps = 10, FilterThreshold = 1e-8 }))),
        ["surrogate"] = ("IQN-ILSM with a twice coarser chamber, without history: fewer iterations from the first step on",
            () => Scenario("North leaf, coarser-mesh surrogate", new GateCase { Loads = Busy }, Sound with { Method = CouplingMethod.IqnIlsm, Surrogate = "coarser-mesh", HistorySteps = 0 })),
        ["diagonal"] = ("IQN-ILSM with the added mass of each height by itself: right for the lowest modes only",
            () => Scenario("North leaf, diagonal surrogate", new GateCase { Loads = Busy }, Sound with { Method = CouplingMethod.IqnIlsm, Surrogate = "added-mass-diagonal", HistorySteps = 0 })),
        ["multi-step"] = ("the multi-vector method over twenty steps", () => Scenario("North leaf, multi-step", new GateCase { Loads = Busy }, Sound with { Method = CouplingMethod.Mvqn, HistorySteps = 20 })),
        ["aitken"] = ("Aitken's relaxation on a stiffer leaf: about 20 iterations a step",
            () => Scenario("Stiff leaf, Aitken", new GateCase { Loads = Busy, Rigidity = 1.2e8 }, Sound with { Method = CouplingMethod.Aitken })),
    };

    /// <summary>Names of the cases with what each shows.</summary>
    public static IReadOnlyDictionary<string, string> Names { get; } = Named.ToDictionary(n => n.Key, n => n.Value.What);

    /// <summary>A case by name.</summary>
    /// <exception cref="ArgumentException">No case has that name.</exception>
    public static GateScenario Of(string name) => Named.TryGetValue(name, out var found)
        ? found.Make()
        : throw new ArgumentException($"No case is named '{name}'; there are {string.Join(", ", Named.Keys)}.", nameof(name));

    private static GateScenario Longer(int from, double factor, GateScenario scenario) =>
        scenario with { Plan = scenario.Plan with { LaterFrom = from, LaterFactor = factor } };

    private static GateScenario Scenario(string title, GateCase gate, CouplingSettings settings) => new(gate, new RunPlan
    {
        Campaign = "north-lock",
        Title = title,
        Settings = settings,
        TimeStep = gate.TimeStep,
        Labels = new Dictionary<string, string> { ["rigidity"] = gate.Rigidity.ToString("G3", System.Globalization.CultureInfo.InvariantCulture) },
    });
}
