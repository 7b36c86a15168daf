using ColdPlate.Channel;
using ColdPlate.Plate;
using CoupledRuns;
using CouplingWatch.Records;

namespace ColdPlate.Coupling;

/// <summary>
/// Dirichlet–Neumann coupling of channel and plate: a trial wall temperature gives the heat flux into the coolant, the plate answers
/// with the wall temperature under that flux. With a well conducting coolant on a poorly conducting plate the roles are the wrong way
/// round, and the plain iteration diverges.
/// </summary>
public sealed class PlateProblem : ICoupledProblem
{
    private readonly PlateCase cold;
    private readonly TimeProvider clock;
    private readonly CoolantChannel channel;
    private readonly HeatedPlate plate;
    private readonly double[] wall, flux, answer;
    private readonly double[] seconds = new double[2];
    private double stepEnd;

    /// <param name="cold">The case; both meshes have the same columns and length.</param>
    /// <param name="clock">Measures the seconds of each solver.</param>
    public PlateProblem(PlateCase cold, TimeProvider clock)
    {
        ArgumentNullException.ThrowIfNull(cold);
        ArgumentNullException.ThrowIfNull(clock);
        if (cold.ChannelMesh.Columns != cold.PlateMesh.Columns || cold.ChannelMesh.Length != cold.PlateMesh.Length)
            throw new ArgumentException("Channel and plate need the same length and the same number of columns.", nameof(cold));
        this.cold = cold;
        this.clock = clock;
        channel = new CoolantChannel(cold.ChannelMesh, cold.Coolant, cold.Velocity);
        plate = new HeatedPlate(cold.PlateMesh, cold.Plate, cold.ConductivitySlope, cold.InnerTolerance);
        wall = new double[Size];
        flux = new double[Size];
        answer = new double[Size];
        Solvers = [new SolverDeclaration("coolant", null, 0.7), new SolverDeclaration("plate", cold.InnerTolerance)];
        Field = new FieldDeclaration
        {
            Name = "wall-temperature",
            Unit = "K",
            Size = Size,
            From = "plate",
            Relative = cold.Relative,
            Absolute = cold.Absolute,
        };
    }

    public IReadOnlyList<SolverDeclaration> Solvers { get; }

    public FieldDeclaration Field { get; }

    public int Size => cold.PlateMesh.Columns;

    public double Time { get; private set; }

    public ReadOnlySpan<double> SolverSeconds => seconds;

    public ReadOnlySpan<double> Accepted => wall;

    /// <summary>Heat stored in both layers, J per metre of width.</summary>
    public double StoredHeat => channel.StoredHeat() + plate.StoredHeat();

    public void BeginStep(double timeStep)
    {
        channel.BeginStep(timeStep);
        plate.BeginStep(timeStep);
        stepEnd = Time + timeStep;
        channel.Inflow = cold.InflowSwing * Math.Sin(2 * Math.PI * stepEnd / 2.3) * (1 - Math.Exp(-stepEnd));
        HeatUp();
    }

    /// <summary>The heaters lie under the wall, pulse at different periods and switch on smoothly.</summary>
    private void HeatUp()
    {
        Array.Clear(plate.Heating);
        for (var h = 0; h < cold.Heaters; h++)
        {
            var middle = (h + 0.5) / cold.Heaters;
            var pulse = Math.Sin(Math.PI * stepEnd / (1.1 + 0.37 * h));
            var power = cold.HeaterPower * pulse * pulse * (1 - Math.Exp(-2 * stepEnd));
            for (var i = 0; i < Size; i++)
            {
                var along = ((i + 0.5) / Size - middle) * cold.Heaters / 0.35;
                var shape = Math.Exp(-0.5 * along * along);
                for (var j = 1; j <= Math.Min(2, plate.NodesAcross - 1); j++) plate.Heating[i * plate.NodesAcross + j] += power * shape / 2;
            }
        }
    }

    public void Pass(ReadOnlySpan<double> x, Span<double> output)
    {
        var start = clock.GetTimestamp();
        channel.Solve(x, flux);
        var between = clock.GetTimestamp();
        plate.Solve(flux, output);
        seconds[0] = clock.GetElapsedTime(start, between).TotalSeconds;
        seconds[1] = clock.GetElapsedTime(between).TotalSeconds;
    }

    public void Accept(ReadOnlySpan<double> x)
    {
        x.CopyTo(wall);
        channel.Accept(wall);
        plate.Accept(wall);
        Time = stepEnd;
    }

    /// <summary>(distance from the inflow, 0, 0).</summary>
    public double[] PlaceOf(int index) => [(index + 0.5) * cold.PlateMesh.Width, 0, 0];
}
