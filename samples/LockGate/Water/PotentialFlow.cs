namespace LockGate.Water;

/// <summary>Where the inner iteration of the water solver begins.</summary>
public enum WarmStart
{
    /// <summary>From the pressure of the pass before: fewer inner iterations, but the error left behind differs from pass to pass.</summary>
    LastPass,

    /// <summary>From the pressure the step began with: every pass of the step leaves the same kind of error.</summary>
    StepStart,
}

/// <summary>
/// Pressure of still, incompressible, inviscid water that is pushed by the leaf: ∇²p = 0, ∂p/∂n = −ρ·a on walls, p = 0 at the surface.
/// Finite volumes on a <see cref="ChamberMesh"/>, solved by preconditioned conjugate gradients to a relative tolerance: what the
/// tolerance leaves behind is the noise of this solver.
/// </summary>
public sealed class PotentialFlow
{
    private readonly double[] diagonal;
    private readonly double east;
    private readonly double north;
    private readonly IncompleteCholesky preconditioner;
    private readonly double[] right, residual, direction, product, preconditioned;
    private readonly double[] pressure;
    private readonly double[] atStepStart;

    /// <param name="mesh">The chamber.</param>
    /// <param name="density">Density of water ρ, kg/m³, above 0.</param>
    /// <param name="tolerance">Inner tolerance ‖b − Ap‖/‖b‖, between 1e-14 and 0.1.</param>
    /// <param name="start">Where each inner solve begins.</param>
    public PotentialFlow(ChamberMesh mesh, double density, double tolerance, WarmStart start)
    {
        ArgumentNullException.ThrowIfNull(mesh);
        if (!(density > 0)) throw new ArgumentOutOfRangeException(nameof(density), density, "The density is in kg/m³ and above 0.");
        if (!(tolerance is >= 1e-14 and <= 0.1))
            throw new ArgumentOutOfRangeException(nameof(tolerance), tolerance, "The inner tolerance lies between 1e-14 and 0.1.");
        Mesh = mesh;
        Density = density;
        Tolerance = tolerance;
        Start = start;
        east = mesh.Height / mesh.Width;
        north = mesh.Width / mesh.Height;
        diagonal = new double[mesh.CellCount];
        for (var j = 0; j < mesh.CellsUp; j++)
        {
            for (var i = 0; i < mesh.CellsAlong; i++)
            {
                var sum = 0.0;
                if (i > 0) sum += east;
                if (i < mesh.CellsAlong - 1) sum += east;
                if (j > 0) sum += north;
                sum += j < mesh.CellsUp - 1 ? north : 2 * north; // the surface lies half a cell above the middle of the top cell
                diagonal[mesh.Cell(i, j)] = sum;
            }
        }
        preconditioner = new IncompleteCholesky(diagonal, mesh.CellsAlong, east, north);
        right = new double[mesh.CellCount];
        residual = new double[mesh.CellCount];
        direction = new double[mesh.CellCount];
        product = new double[mesh.CellCount];
        preconditioned = new double[mesh.CellCount];
        pressure = new double[mesh.CellCount];
        atStepStart = new double[mesh.CellCount];
    }

    public ChamberMesh Mesh { get; }

    public double Density { get; }

    public double Tolerance { get; set; }

    public WarmStart Start { get; }

    /// <summary>Inner iterations of the latest solve.</summary>
    public int InnerIterations { get; private set; }

    /// <summary>Inner iterations of all solves so far.</summary>
    public long TotalInnerIterations { get; private set; }

    /// <summary>Keeps the present pressure as the start of the step's inner solves.</summary>
    public void BeginStep() => pressure.CopyTo(atStepStart, 0);

    /// <summary>Pressure on the leaf for given accelerations of its faces.</summary>
    /// <param name="leafAcceleration">Acceleration of each leaf face towards the water, mean over the face, m/s²; length <c>CellsUp</c>, from the sill up.</param>
    /// <param name="groundAcceleration">Acceleration of the far wall in the same direction, m/s².</param>
    /// <param name="leafPressure">Receives the pressure on each leaf face, Pa; length <c>CellsUp</c>.</param>
    /// <remarks>A non-finite acceleration gives non-finite pressures and no inner iterations.</remarks>
    public void Solve(ReadOnlySpan<double> leafAcceleration, double groundAcceleration, Span<double> leafPressure)
    {
        Check(leafAcceleration.Length, nameof(leafAcceleration));
        Check(leafPressure.Length, nameof(leafPressure));
        Array.Clear(right);
        for (var j = 0; j < Mesh.CellsUp; j++)
        {
            right[Mesh.Cell(0, j)] += Density * leafAcceleration[j] * Mesh.Height;
            right[Mesh.Cell(Mesh.CellsAlong - 1, j)] -= Density * groundAcceleration * Mesh.Height;
        }
        if (Start == WarmStart.StepStart) atStepStart.CopyTo(pressure, 0);
        if (double.IsFinite(Dot(right, right))) ConjugateGradients();
        for (var j = 0; j < Mesh.CellsUp; j++)
            leafPressure[j] = pressure[Mesh.Cell(0, j)] + Density * leafAcceleration[j] * Mesh.Width / 2;
    }

    private void Check(int length, string name)
    {
        if (length != Mesh.CellsUp)
            throw new ArgumentException($"{length} values for {Mesh.CellsUp} leaf faces; one a face is needed.", name);
    }

    private void ConjugateGradients()
    {
        var target = Tolerance * Tolerance * Dot(right, right);
        Multiply(pressure, product);
        for (var c = 0; c < residual.Length; c++) residual[c] = right[c] - product[c];
        InnerIterations = 0;
        var rho = 0.0;
        while (Dot(residual, residual) > target && InnerIterations < 10 * (Mesh.CellsAlong + Mesh.CellsUp))
        {
            preconditioner.Solve(residual, preconditioned);
            var next = Dot(residual, preconditioned);
            var beta = InnerIterations == 0 ? 0 : next / rho;
            rho = next;
            for (var c = 0; c < direction.Length; c++) direction[c] = preconditioned[c] + beta * direction[c];
            Multiply(direction, product);
            var alpha = rho / Dot(direction, product);
            for (var c = 0; c < pressure.Length; c++)
            {
                pressure[c] += alpha * direction[c];
                residual[c] -= alpha * product[c];
            }
            InnerIterations++;
        }
        TotalInnerIterations += InnerIterations;
    }

    private void Multiply(double[] x, double[] y)
    {
        int along = Mesh.CellsAlong, last = Mesh.CellCount - along;
        for (var row = 0; row <= last; row += along)
        {
            for (var c = row; c < row + along; c++)
            {
                var value = diagonal[c] * x[c];
                if (c > row) value -= east * x[c - 1];
                if (c < row + along - 1) value -= east * x[c + 1];
                if (row > 0) value -= north * x[c - along];
                if (row < last) value -= north * x[c + along];
                y[c] = value;
            }
        }
    }

    private static double Dot(double[] a, double[] b)
    {
        var sum = 0.0;
        for (var i = 0; i < a.Length; i++) sum += a[i] * b[i];
        return sum;
    }
}
