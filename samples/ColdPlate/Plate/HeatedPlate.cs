using ColdPlate.Layers;

namespace ColdPlate.Plate;

/// <summary>
/// The plate: heat conduction with a conductivity that grows linearly with temperature, k = k₀(1 + s·T), and embedded heaters;
/// implicit Euler, finite volumes. The heat that leaves through the wetted wall is given, the wall temperature is the answer.
/// The nonlinear system is solved by fixed-point iteration on the conductivity to a relative tolerance: the noise of this solver.
/// </summary>
public sealed class HeatedPlate
{
    private readonly LayerMesh mesh;
    private readonly LayerMaterial material;
    private readonly double slope, tolerance;
    private readonly int nodes;
    private readonly BandedLu matrix;
    private readonly double[] temperature, accepted, before, right;
    private double timeStep;
    private bool linearFactored;

    /// <param name="mesh">The plate; same length and columns as the channel.</param>
    /// <param name="material">Conductivity at the reference temperature, and heat capacity.</param>
    /// <param name="slope">Relative growth of the conductivity, 1/K.</param>
    /// <param name="tolerance">Relative change of the wall temperature at which the inner iteration stops, between 1e-14 and 1e-2.</param>
    public HeatedPlate(LayerMesh mesh, LayerMaterial material, double slope, double tolerance)
    {
        ArgumentNullException.ThrowIfNull(mesh);
        ArgumentNullException.ThrowIfNull(material);
        if (!(tolerance is >= 1e-14 and <= 1e-2)) throw new ArgumentOutOfRangeException(nameof(tolerance), tolerance, "The tolerance lies between 1e-14 and 1e-2.");
        if (!double.IsFinite(slope)) throw new ArgumentOutOfRangeException(nameof(slope), slope, "The slope is finite, 1/K.");
        this.mesh = mesh.Checked();
        this.material = material;
        this.slope = slope;
        this.tolerance = tolerance;
        nodes = mesh.Inner + 1;
        matrix = new BandedLu(mesh.Columns * nodes, nodes);
        temperature = new double[matrix.Size];
        accepted = new double[matrix.Size];
        before = new double[matrix.Size];
        right = new double[matrix.Size];
        Heating = new double[matrix.Size];
    }

    /// <summary>Heat the embedded heaters bring to each cell at the end of the step, W/m² of interface; column by column, node 0 first.</summary>
    public double[] Heating { get; }

    /// <summary>Inner iterations of the latest solve.</summary>
    public int InnerIterations { get; private set; }

    /// <summary>Nodes of a column that are unknown: the wall and the inner ones.</summary>
    public int NodesAcross => nodes;

    public void BeginStep(double dt)
    {
        if (!(dt > 0) || !double.IsFinite(dt)) throw new ArgumentOutOfRangeException(nameof(dt), dt, "The time step is in seconds and above 0.");
        if (dt != timeStep) linearFactored = false;
        timeStep = dt;
    }

    /// <summary>Wall temperature at the end of the step.</summary>
    /// <param name="flux">Heat that leaves through the wall, W/m² of each column.</param>
    /// <param name="wall">Receives the wall temperature of each column, K. Not finite when a flux is not.</param>
    public void Solve(ReadOnlySpan<double> flux, Span<double> wall)
    {
        foreach (var q in flux)
        {
            if (double.IsFinite(q)) continue;
            wall.Fill(double.NaN);
            return;
        }
        accepted.CopyTo(temperature, 0);
        for (InnerIterations = 1; InnerIterations <= 50; InnerIterations++)
        {
            temperature.CopyTo(before, 0);
            if (slope != 0 || !linearFactored) Assemble();
            RightSide(flux);
            matrix.Solve(right);
            right.CopyTo(temperature, 0);
            if (slope == 0 || Converged()) break;
        }
        for (var i = 0; i < mesh.Columns; i++) wall[i] = temperature[i * nodes];
    }

    private bool Converged()
    {
        double change = 0, size = 0;
        for (var n = 0; n < temperature.Length; n += nodes)
        {
            change += (temperature[n] - before[n]) * (temperature[n] - before[n]);
            size += temperature[n] * temperature[n];
        }
        return change <= tolerance * tolerance * size;
    }

    private double Conductivity(int a, int b) => material.Conductivity * Math.Max(0.1, 1 + slope * 0.5 * (before[a] + before[b]));

    private void Assemble()
    {
        matrix.Clear();
        var storage = material.HeatCapacity * mesh.Spacing / timeStep;
        for (var i = 0; i < mesh.Columns; i++)
        {
            for (var j = 0; j < nodes; j++)
            {
                var row = i * nodes + j;
                var share = j == 0 ? 0.5 : 1;
                matrix.Add(row, row, share * storage);
                if (j < nodes - 1) Join(row, row + 1, Conductivity(row, row + 1) / mesh.Spacing);
                else matrix.Add(row, row, Conductivity(row, row) / mesh.Spacing); // the held far wall
                if (i < mesh.Columns - 1)
                    Join(row, row + nodes, share * Conductivity(row, row + nodes) * mesh.Spacing / (mesh.Width * mesh.Width));
            }
        }
        matrix.Factor();
        linearFactored = slope == 0;
    }

    private void Join(int a, int b, double conductance)
    {
        matrix.Add(a, a, conductance);
        matrix.Add(b, b, conductance);
        matrix.Add(a, b, -conductance);
        matrix.Add(b, a, -conductance);
    }

    private void RightSide(ReadOnlySpan<double> flux)
    {
        var storage = material.HeatCapacity * mesh.Spacing / timeStep;
        for (var i = 0; i < mesh.Columns; i++)
        {
            for (var j = 0; j < nodes; j++)
            {
                var row = i * nodes + j;
                right[row] = (j == 0 ? 0.5 : 1) * storage * accepted[row] + Heating[row];
                if (j == 0) right[row] -= flux[i];
            }
        }
    }

    /// <summary>Accepts the state of the latest solve, with the wall at <paramref name="wall"/>.</summary>
    public void Accept(ReadOnlySpan<double> wall)
    {
        temperature.CopyTo(accepted, 0);
        for (var i = 0; i < mesh.Columns; i++) accepted[i * nodes] = wall[i];
    }

    /// <summary>Heat stored in the plate and in its half of the wall cells, J per metre of plate width.</summary>
    public double StoredHeat()
    {
        var sum = 0.0;
        for (var n = 0; n < accepted.Length; n++) sum += (n % nodes == 0 ? 0.5 : 1) * accepted[n];
        return sum * material.HeatCapacity * mesh.Spacing * mesh.Width;
    }
}
