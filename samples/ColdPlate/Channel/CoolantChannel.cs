using ColdPlate.Layers;

namespace ColdPlate.Channel;

/// <summary>
/// Coolant in a narrow channel: conduction and advection by a given parabolic velocity profile, implicit Euler, finite volumes with
/// upwind advection. The temperature of the wetted wall is given, the heat that flows into the coolant is the answer.
/// Temperatures count from the temperature of the far wall, K.
/// </summary>
public sealed class CoolantChannel
{
    private readonly LayerMesh mesh;
    private readonly LayerMaterial material;
    private readonly double meanVelocity;
    private readonly BandedLu matrix;
    private readonly double[] temperature, accepted, wallAccepted, right;
    private double timeStep = double.NaN;

    /// <param name="mesh">The channel; inflow at column 0.</param>
    /// <param name="material">The coolant.</param>
    /// <param name="meanVelocity">Mean velocity along the channel, m/s, 0 or more.</param>
    public CoolantChannel(LayerMesh mesh, LayerMaterial material, double meanVelocity)
    {
        ArgumentNullException.ThrowIfNull(mesh);
        ArgumentNullException.ThrowIfNull(material);
        if (!(meanVelocity >= 0)) throw new ArgumentOutOfRangeException(nameof(meanVelocity), meanVelocity, "The velocity is 0 or more, m/s.");
        this.mesh = mesh.Checked();
        this.material = material;
        this.meanVelocity = meanVelocity;
        matrix = new BandedLu(mesh.Columns * mesh.Inner, mesh.Inner);
        temperature = new double[matrix.Size];
        accepted = new double[matrix.Size];
        right = new double[matrix.Size];
        wallAccepted = new double[mesh.Columns];
    }

    /// <summary>Temperature of the inflow, K above the far wall.</summary>
    public double Inflow { get; set; }

    private double Storage => material.HeatCapacity * mesh.Spacing / timeStep;

    private double Across => material.Conductivity / mesh.Spacing;

    private double Along => material.Conductivity * mesh.Spacing / (mesh.Width * mesh.Width);

    /// <summary>Advection of node j (1 … inner): ρc·u(y)·Δy/Δx with u = 6ū·η(1 − η).</summary>
    private double Advection(int j)
    {
        var eta = j * mesh.Spacing / mesh.Thickness;
        return material.HeatCapacity * 6 * meanVelocity * eta * (1 - eta) * mesh.Spacing / mesh.Width;
    }

    /// <summary>Prepares a step of <paramref name="dt"/> seconds.</summary>
    public void BeginStep(double dt)
    {
        if (!(dt > 0) || !double.IsFinite(dt)) throw new ArgumentOutOfRangeException(nameof(dt), dt, "The time step is in seconds and above 0.");
        if (dt == timeStep) return;
        timeStep = dt;
        matrix.Clear();
        for (var i = 0; i < mesh.Columns; i++)
        {
            for (var j = 1; j <= mesh.Inner; j++)
            {
                var row = i * mesh.Inner + j - 1;
                matrix.Add(row, row, Storage + 2 * Across + Advection(j));
                if (j > 1) matrix.Add(row, row - 1, -Across);
                if (j < mesh.Inner) matrix.Add(row, row + 1, -Across);
                if (i > 0)
                {
                    matrix.Add(row, row, Along);
                    matrix.Add(row, row - mesh.Inner, -Along - Advection(j));
                }
                if (i < mesh.Columns - 1)
                {
                    matrix.Add(row, row, Along);
                    matrix.Add(row, row + mesh.Inner, -Along);
                }
            }
        }
        matrix.Factor();
    }

    /// <summary>Heat that flows from the wall into the coolant at the end of the step.</summary>
    /// <param name="wall">Wall temperature of each column, K.</param>
    /// <param name="flux">Receives W/m² of each column.</param>
    public void Solve(ReadOnlySpan<double> wall, Span<double> flux)
    {
        for (var i = 0; i < mesh.Columns; i++)
        {
            for (var j = 1; j <= mesh.Inner; j++)
            {
                var row = i * mesh.Inner + j - 1;
                right[row] = Storage * accepted[row];
                if (j == 1) right[row] += Across * wall[i];
                if (i == 0) right[row] += Advection(j) * Inflow;
            }
        }
        matrix.Solve(right);
        right.CopyTo(temperature, 0);
        for (var i = 0; i < mesh.Columns; i++)
        {
            flux[i] = Storage / 2 * (wall[i] - wallAccepted[i]) + Across * (wall[i] - temperature[i * mesh.Inner]);
            if (i > 0) flux[i] += Along / 2 * (wall[i] - wall[i - 1]);
            if (i < mesh.Columns - 1) flux[i] += Along / 2 * (wall[i] - wall[i + 1]);
        }
    }

    /// <summary>Accepts the wall temperatures <paramref name="wall"/> and the coolant state that belongs to them.</summary>
    public void Accept(ReadOnlySpan<double> wall)
    {
        Span<double> unused = stackalloc double[mesh.Columns];
        Solve(wall, unused);
        temperature.CopyTo(accepted, 0);
        wall.CopyTo(wallAccepted);
    }

    /// <summary>Heat stored in the coolant and in its half of the wall cells, J per metre of channel width.</summary>
    public double StoredHeat()
    {
        var sum = 0.0;
        foreach (var t in accepted) sum += t;
        foreach (var t in wallAccepted) sum += t / 2;
        return sum * material.HeatCapacity * mesh.Spacing * mesh.Width;
    }
}
