using ColdPlate.Coupling;
using ColdPlate.Layers;
using CoupledRuns;
using LockGate.Coupling;
using LockGate.Leaf;
using LockGate.Loads;
using LockGate.Water;

namespace CouplingWatch.Sweeps;

/// <param name="Name">Short, for the table.</param>
/// <param name="Held">Never looked at while constants were chosen.</param>
/// <param name="Make">A fresh problem at time 0.</param>
/// <param name="TimeStep">s.</param>
internal sealed record Variant(string Name, bool Held, Func<ICoupledProblem> Make, double TimeStep, double LaterFactor = 1, int? LaterFrom = null);

/// <summary>Variants of both samples. Meshes are coarser than in the samples so that a sweep takes minutes; the number of coupling iterations hardly depends on that.</summary>
internal static class Variants
{
    private static readonly GateCase Gate = new()
    {
        CellsAlong = 40,
        CellsUp = 20,
        Elements = 24,
        Loads = [new VesselNudge(6e4, 9, 1.2, 0.02, 0.25, 0.4), new Wash(4e3, 12, [1.1, 1.7])],
    };

    private static readonly PlateCase Plate = new()
    {
        ChannelMesh = new LayerMesh(0.03, 0.31e-3, 40, 6),
        PlateMesh = new LayerMesh(0.03, 4e-3, 40, 8),
    };

    public static IReadOnlyList<Variant> All { get; } =
    [
        Leaf("leaf", false, Gate),
        Leaf("leaf, ground, noise 1e-6", false, Gate with
        {
            InnerTolerance = 1e-6, Loads = [], Ground = new GroundMotion(0.8, [3.1, 7.7, 13], 0.9),
        }),
        Leaf("leaf, seal", false, Gate with { Seal = new SealContact(12, 2e-4, 4e6, 4e-5) }),
        Leaf("leaf, stiff", false, Gate with { Rigidity = 1.2e8, GapDrag = 20 }),
        Heat("plate", false, Plate),
        Heat("plate, fast coolant", false, Plate with { Velocity = 0.08, Heaters = 7 }),
        Heat("plate, noise 1e-5", false, Plate with { InnerTolerance = 1e-5, Relative = 2e-5 }),
        Heat("plate, weak", false, Plate with { Coolant = new LayerMaterial(0.6, 4.2e6), Plate = new LayerMaterial(12, 2.4e6), Velocity = 0.1 }),

        Leaf("leaf, soft, long chamber", true, Gate with { Rigidity = 2e7, Chamber = 55, GapDrag = 60 }),
        Leaf("leaf, ground and wash", true, Gate with
        {
            Loads = [new Wash(9e3, 12, [0.8, 1.3, 2.1])], Ground = new GroundMotion(0.5, [2.3, 5.9], 1.3), GapDrag = 25, TimeStep = 0.01,
        }, 0.01),
        Leaf("leaf, seal, noise 3e-7", true, Gate with { InnerTolerance = 3e-7, Seal = new SealContact(10.5, 1e-4, 8e6, 2e-5) }),
        Leaf("leaf, time step doubles", true, Gate with { LeafMass = 500 }) with { LaterFrom = 60, LaterFactor = 2 },
        Heat("plate, thin", true, Plate with { PlateMesh = new LayerMesh(0.03, 2.5e-3, 40, 8), TimeStep = 0.02 }, 0.02),
        Heat("plate, strongly nonlinear", true, Plate with { ConductivitySlope = 1.5e-2, HeaterPower = 6e4, InflowSwing = 8 }),
        Heat("plate, noise 2e-5", true, Plate with { InnerTolerance = 2e-5, Relative = 3e-5, Heaters = 2, Velocity = 0.04 }),
    ];

    private static Variant Leaf(string name, bool held, GateCase gate, double timeStep = 0.005) =>
        new(name, held, () => new GateProblem(gate with { TimeStep = timeStep }, TimeProvider.System), timeStep);

    private static Variant Heat(string name, bool held, PlateCase plate, double timeStep = 0.05) =>
        new(name, held, () => new PlateProblem(plate with { TimeStep = timeStep }, TimeProvider.System), timeStep);
}
