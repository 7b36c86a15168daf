using CouplingWatch.Coupling.Surrogates;
using LockGate.Leaf;
using LockGate.Water;

namespace LockGate.Coupling;

/// <summary>Which stand-in answers for the water.</summary>
public enum GateSurrogateKind
{
    /// <summary>
    /// Added mass of each height by itself, 7/8 ρ √(H z) ("Water pressures on dams during earthquakes", Trans. ASCE 98 (1933) 418-433):
    /// right for the lowest modes only.
    /// </summary>
    AddedMassDiagonal,

    /// <summary>Potential flow on a mesh twice as coarse.</summary>
    CoarserMesh,
}

/// <summary>A linear model of the pass: the leaf itself under the pressure of a cheaper water. It follows the step the leaf is in.</summary>
internal sealed class GateSurrogate : ISurrogate
{
    private readonly GateCase gate;
    private readonly GateLeaf leaf;
    private readonly PotentialFlow? water;
    private readonly LeafRow[] faces;
    private readonly TimeProvider clock;
    private readonly LinearPassSurrogate solver;
    private readonly double[] faceAcceleration, facePressure, load;
    private readonly double faceHeight;

    public GateSurrogate(GateCase gate, GateLeaf leaf, GateSurrogateKind kind, TimeProvider clock)
    {
        this.gate = gate;
        this.leaf = leaf;
        this.clock = clock;
        var up = kind == GateSurrogateKind.CoarserMesh ? Math.Max(2, gate.CellsUp / 2) : gate.CellsUp;
        if (kind == GateSurrogateKind.CoarserMesh)
            water = new PotentialFlow(new ChamberMesh(gate.Chamber, gate.Height, Math.Max(2, gate.CellsAlong / 2), up), gate.WaterDensity, 1e-5, WarmStart.StepStart);
        faceHeight = gate.Height / up;
        faces = [.. Enumerable.Range(0, up).Select(j => leaf.Shape.Mean(j * faceHeight, (j + 1) * faceHeight))];
        faceAcceleration = new double[up];
        facePressure = new double[up];
        load = new double[leaf.Unknowns];
        solver = new LinearPassSurrogate(leaf.Unknowns, Pass, tolerance: 3e-2);
    }

    /// <summary>Wall seconds of the latest answer.</summary>
    public double Seconds { get; private set; }

    public int Add(ReadOnlySpan<double> residualChange, Span<double> outputChange)
    {
        var start = clock.GetTimestamp();
        var evaluations = solver.Add(residualChange, outputChange);
        Seconds = clock.GetElapsedTime(start).TotalSeconds;
        return evaluations;
    }

    private void Pass(ReadOnlySpan<double> dx, Span<double> output)
    {
        for (var j = 0; j < faces.Length; j++) faceAcceleration[j] = faces[j].Dot(dx) * leaf.AccelerationPerDeflection;
        if (water is not null)
        {
            water.Solve(faceAcceleration, 0, facePressure);
        }
        else
        {
            for (var j = 0; j < faces.Length; j++)
            {
                var below = gate.Height - (j + 0.5) * faceHeight;
                facePressure[j] = 7.0 / 8 * gate.WaterDensity * Math.Sqrt(gate.Height * below) * faceAcceleration[j];
            }
        }
        Array.Clear(load);
        for (var j = 0; j < faces.Length; j++) faces[j].AddTo(load, -facePressure[j] * faceHeight);
        leaf.SolveIncrement(load, output);
    }
}
