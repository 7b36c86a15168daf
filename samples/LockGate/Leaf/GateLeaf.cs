namespace LockGate.Leaf;

/// <summary>What the leaf is made of. All figures per metre of leaf width.</summary>
/// <param name="Height">From sill to top, m.</param>
/// <param name="Mass">kg/m².</param>
/// <param name="Rigidity">EI, N·m²/m.</param>
/// <param name="Elements">Hermite elements; the leaf has two unknowns an element.</param>
/// <param name="StiffnessDamping">Factor of the stiffness-proportional damping, s.</param>
/// <param name="Seal">One-sided seal, or null.</param>
public sealed record LeafProperties(double Height, double Mass, double Rigidity, int Elements, double StiffnessDamping, SealContact? Seal);

/// <summary>
/// A gate leaf clamped at the sill and free at the top: Euler-Bernoulli beam, Hermite elements, Newmark in time with constant mean
/// acceleration (β = 1/4, γ = 1/2: "A method of computation for structural dynamics", J. Eng. Mech. Div. ASCE 85 (1959) 67-94).
/// Deflections count from the equilibrium under still water, positive towards the water.
/// </summary>
public sealed class GateLeaf
{
    private const double Beta = 0.25;
    private const double Gamma = 0.5;
    private readonly BandMatrix mass, stiffness, effective, tangent;
    private readonly LeafRow? sealRow;
    private readonly double[] deflection, velocity, acceleration, fromPast, velocityFromPast, work, right;
    private double timeStep;

    public GateLeaf(LeafProperties properties)
    {
        ArgumentNullException.ThrowIfNull(properties);
        if (!(properties.Height > 0 && properties.Mass > 0 && properties.Rigidity > 0 && properties.StiffnessDamping >= 0))
            throw new ArgumentOutOfRangeException(nameof(properties), properties, "Height, mass and rigidity are above 0, damping 0 or more.");
        ArgumentOutOfRangeException.ThrowIfLessThan(properties.Elements, 2);
        Properties = properties;
        Shape = new LeafShape(properties.Height, properties.Elements);
        Unknowns = Shape.Unknowns;
        mass = new BandMatrix(Unknowns);
        stiffness = new BandMatrix(Unknowns);
        effective = new BandMatrix(Unknowns);
        tangent = new BandMatrix(Unknowns);
        Assemble();
        sealRow = properties.Seal is { } seal ? Shape.At(seal.Height) : null;
        deflection = new double[Unknowns];
        velocity = new double[Unknowns];
        acceleration = new double[Unknowns];
        fromPast = new double[Unknowns];
        velocityFromPast = new double[Unknowns];
        work = new double[Unknowns];
        right = new double[Unknowns];
    }

    public LeafProperties Properties { get; }

    internal LeafShape Shape { get; }

    /// <summary>Number of unknowns: deflection and rotation times element length of every node above the sill, from the sill up.</summary>
    public int Unknowns { get; }

    public ReadOnlySpan<double> Deflection => deflection;

    public ReadOnlySpan<double> Velocity => velocity;

    public ReadOnlySpan<double> Acceleration => acceleration;

    private void Assemble()
    {
        var p = Properties;
        for (var e = 0; e < p.Elements; e++)
        {
            for (var a = 0; a < 4; a++)
            {
                for (var b = 0; b < 4; b++)
                {
                    int row = LeafShape.Unknown(e, a), column = LeafShape.Unknown(e, b);
                    if (row < 0 || column < 0) continue;
                    mass.Add(row, column, HermiteElement.Mass(a, b, p.Mass, Shape.ElementLength));
                    stiffness.Add(row, column, HermiteElement.Stiffness(a, b, p.Rigidity, Shape.ElementLength));
                }
            }
        }
    }

    /// <summary>Prepares a step of length <paramref name="dt"/> (s, above 0) from the accepted state. May be called again for the same step.</summary>
    public void BeginStep(double dt)
    {
        if (!(dt > 0) || !double.IsFinite(dt)) throw new ArgumentOutOfRangeException(nameof(dt), dt, "The time step is in seconds and above 0.");
        timeStep = dt;
        for (var i = 0; i < Unknowns; i++)
        {
            fromPast[i] = deflection[i] + dt * velocity[i] + dt * dt * (0.5 - Beta) * acceleration[i];
            velocityFromPast[i] = velocity[i] + dt * (1 - Gamma) * acceleration[i];
        }
        effective.CopyFrom(stiffness);
        effective.Add(mass, 1 / (Beta * dt * dt));
        effective.Add(stiffness, Properties.StiffnessDamping * Gamma / (Beta * dt));
    }

    /// <summary>Velocity and acceleration that belong to a deflection at the end of the step.</summary>
    public void Kinematics(ReadOnlySpan<double> x, Span<double> velocities, Span<double> accelerations)
    {
        for (var i = 0; i < Unknowns; i++)
        {
            accelerations[i] = (x[i] - fromPast[i]) / (Beta * timeStep * timeStep);
            velocities[i] = velocityFromPast[i] + Gamma * timeStep * accelerations[i];
        }
    }

    /// <summary>Deflection at the end of the step under <paramref name="load"/>.</summary>
    /// <param name="load">Consistent nodal loads towards the water, N per metre of width; length <see cref="Unknowns"/>.</param>
    /// <param name="x">Receives the deflection. A non-finite load gives NaN.</param>
    public void Solve(ReadOnlySpan<double> load, Span<double> x)
    {
        load.CopyTo(right);
        for (var i = 0; i < Unknowns; i++) work[i] = fromPast[i] / (Beta * timeStep * timeStep);
        mass.MultiplyAdd(work, 1, right);
        for (var i = 0; i < Unknowns; i++) work[i] = fromPast[i] * Gamma / (Beta * timeStep) - velocityFromPast[i];
        stiffness.MultiplyAdd(work, Properties.StiffnessDamping, right);
        foreach (var value in right)
        {
            if (double.IsFinite(value)) continue;
            x.Fill(double.NaN);
            return;
        }
        if (sealRow is null)
        {
            tangent.CopyFrom(effective);
            tangent.Factor();
            right.CopyTo(x);
            tangent.Solve(x);
        }
        else
        {
            SolveWithSeal(x);
        }
    }

    /// <summary>Newton on the seal force. The force is convex and monotone in the deflection, so full steps from a free leaf converge.</summary>
    private void SolveWithSeal(Span<double> x)
    {
        deflection.CopyTo(x);
        for (var n = 0; n < 60; n++)
        {
            var (force, slope) = Properties.Seal!.At(sealRow!.Dot(x));
            right.CopyTo(work, 0);
            effective.MultiplyAdd(x, -1, work);
            sealRow.AddTo(work, -force);
            tangent.CopyFrom(effective);
            foreach (var (i, a) in sealRow.Entries)
                foreach (var (j, b) in sealRow.Entries) tangent.Add(i, j, slope * a * b);
            tangent.Factor();
            tangent.Solve(work);
            double change = 0, size = 0;
            for (var i = 0; i < Unknowns; i++)
            {
                x[i] += work[i];
                change += work[i] * work[i];
                size += x[i] * x[i];
            }
            if (change <= 1e-26 * size) return;
        }
    }

    /// <summary>Change of acceleration per change of deflection at the end of the step, 1/s².</summary>
    public double AccelerationPerDeflection => 1 / (Beta * timeStep * timeStep);

    /// <summary>Change of the deflection for a change of the load, the seal left out of account.</summary>
    /// <param name="load">Change of the nodal loads, N per metre of width.</param>
    /// <param name="x">Receives the change of the deflection, m.</param>
    public void SolveIncrement(ReadOnlySpan<double> load, Span<double> x)
    {
        tangent.CopyFrom(effective);
        tangent.Factor();
        load.CopyTo(x);
        tangent.Solve(x);
    }

    /// <summary>Accepts a deflection as the end of the step.</summary>
    public void Accept(ReadOnlySpan<double> x)
    {
        Kinematics(x, velocity, acceleration);
        x.CopyTo(deflection);
    }

    /// <summary>Kinetic and strain energy of the leaf alone, J per metre of width.</summary>
    public double Energy()
    {
        Array.Clear(work);
        mass.MultiplyAdd(velocity, 0.5, work);
        var energy = 0.0;
        for (var i = 0; i < Unknowns; i++) energy += velocity[i] * work[i];
        Array.Clear(work);
        stiffness.MultiplyAdd(deflection, 0.5, work);
        for (var i = 0; i < Unknowns; i++) energy += deflection[i] * work[i];
        return energy;
    }

    /// <summary>Sets deflection and velocity (m, m/s), for a start that is not at rest; the acceleration becomes that of the free leaf.</summary>
    public void Release(ReadOnlySpan<double> x, ReadOnlySpan<double> v)
    {
        x.CopyTo(deflection);
        v.CopyTo(velocity);
        Array.Clear(acceleration);
        stiffness.MultiplyAdd(deflection, -1, acceleration);
        stiffness.MultiplyAdd(velocity, -Properties.StiffnessDamping, acceleration);
        tangent.CopyFrom(mass);
        tangent.Factor();
        tangent.Solve(acceleration);
    }
}
