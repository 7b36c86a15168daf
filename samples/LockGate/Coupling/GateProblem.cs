using CoupledRuns;
using CouplingWatch.Coupling.Surrogates;
using CouplingWatch.Records;
using LockGate.Leaf;
using LockGate.Water;

namespace LockGate.Coupling;

/// <summary>
/// The leaf against the water, in the order water → leaf: a trial deflection gives the acceleration of the leaf's faces, the water
/// answers with pressure, the leaf answers with the deflection under that pressure.
/// </summary>
public sealed class GateProblem : ICoupledProblem
{
    private readonly GateCase gate;
    private readonly TimeProvider clock;
    private readonly PotentialFlow water;
    private readonly GateLeaf leaf;
    private readonly LeafRow[] faces;
    private readonly double[] velocity, acceleration, faceAcceleration, facePressure, load, steadyLoad;
    private readonly double[] seconds = new double[2];
    private double stepEnd, ground;
    private GateSurrogate? surrogate;

    /// <param name="gate">The case.</param>
    /// <param name="clock">Measures the seconds of each solver.</param>
    public GateProblem(GateCase gate, TimeProvider clock)
    {
        ArgumentNullException.ThrowIfNull(gate);
        ArgumentNullException.ThrowIfNull(clock);
        this.gate = gate;
        this.clock = clock;
        var mesh = new ChamberMesh(gate.Chamber, gate.Height, gate.CellsAlong, gate.CellsUp);
        water = new PotentialFlow(mesh, gate.WaterDensity, gate.InnerTolerance, gate.WarmStart);
        leaf = new GateLeaf(new LeafProperties(gate.Height, gate.LeafMass, gate.Rigidity, gate.Elements, gate.Damping, gate.Seal));
        faces = [.. Enumerable.Range(0, mesh.CellsUp).Select(j => leaf.Shape.Mean(j * mesh.Height, (j + 1) * mesh.Height))];
        velocity = new double[leaf.Unknowns];
        acceleration = new double[leaf.Unknowns];
        load = new double[leaf.Unknowns];
        steadyLoad = new double[leaf.Unknowns];
        faceAcceleration = new double[mesh.CellsUp];
        facePressure = new double[mesh.CellsUp];
        Solvers = [new SolverDeclaration("water", gate.InnerTolerance, 0.9), new SolverDeclaration("leaf")];
        Field = new FieldDeclaration
        {
            Name = "deflection",
            Unit = "m",
            Size = leaf.Unknowns,
            From = "leaf",
            Relative = gate.Relative,
            Absolute = gate.Absolute,
        };
    }

    public IReadOnlyList<SolverDeclaration> Solvers { get; }

    public FieldDeclaration Field { get; }

    public int Size => leaf.Unknowns;

    public double Time { get; private set; }

    public ReadOnlySpan<double> SolverSeconds => seconds;

    public ReadOnlySpan<double> Accepted => leaf.Deflection;

    /// <summary>The water solver, for its tolerance and its inner iterations.</summary>
    public PotentialFlow Water => water;

    /// <summary>The leaf in its accepted state.</summary>
    public GateLeaf Leaf => leaf;

    public void BeginStep(double timeStep)
    {
        leaf.BeginStep(timeStep);
        water.BeginStep();
        stepEnd = Time + timeStep;
        ground = gate.Ground?.Acceleration(stepEnd) ?? 0;
        Array.Clear(steadyLoad);
        for (var j = 0; j < faces.Length; j++)
        {
            var pressure = -gate.LeafMass * ground;
            foreach (var one in gate.Loads) pressure += one.Pressure(stepEnd, water.Mesh.FaceMiddle(j));
            faces[j].AddTo(steadyLoad, pressure * water.Mesh.Height);
        }
    }

    public void Pass(ReadOnlySpan<double> x, Span<double> output)
    {
        var start = clock.GetTimestamp();
        leaf.Kinematics(x, velocity, acceleration);
        for (var j = 0; j < faces.Length; j++) faceAcceleration[j] = ground + faces[j].Dot(acceleration);
        water.Solve(faceAcceleration, ground, facePressure);
        var between = clock.GetTimestamp();
        steadyLoad.CopyTo(load, 0);
        for (var j = 0; j < faces.Length; j++)
        {
            var v = faces[j].Dot(velocity);
            var drag = 0.5 * gate.WaterDensity * gate.GapDrag * Math.Abs(v) * v;
            faces[j].AddTo(load, -(facePressure[j] + drag) * water.Mesh.Height);
        }
        leaf.Solve(load, output);
        seconds[0] = clock.GetElapsedTime(start, between).TotalSeconds;
        seconds[1] = clock.GetElapsedTime(between).TotalSeconds;
    }

    public void Accept(ReadOnlySpan<double> x)
    {
        leaf.Accept(x);
        Time = stepEnd;
    }

    /// <inheritdoc/>
    /// <remarks><c>added-mass-diagonal</c> or <c>coarser-mesh</c>.</remarks>
    public ISurrogate? Surrogate(string name) => surrogate = name switch
    {
        "added-mass-diagonal" => new GateSurrogate(gate, leaf, GateSurrogateKind.AddedMassDiagonal, clock),
        "coarser-mesh" => new GateSurrogate(gate, leaf, GateSurrogateKind.CoarserMesh, clock),
        _ => null,
    };

    public double SurrogateSeconds => surrogate?.Seconds ?? 0;

    /// <summary>(0, height above the sill, 0): the unknowns lie in pairs, node by node, from the first node above the sill.</summary>
    public double[] PlaceOf(int index) => [0, (index / 2 + 1) * leaf.Shape.ElementLength, 0];
}
