namespace LockGate.Loads;

/// <summary>
/// Wash of passing vessels on the outer face: deep-water waves of a few periods, pressure amplitude decaying with depth as
/// exp(−ω²/g · depth) (Airy's linear wave theory, deep water).
/// </summary>
/// <param name="Amplitude">Sum of the pressure amplitudes at the surface, Pa.</param>
/// <param name="Depth">Height of the surface above the sill, m.</param>
/// <param name="Periods">Wave periods, s, each above 0; equal shares of the amplitude.</param>
public sealed record Wash(double Amplitude, double Depth, IReadOnlyList<double> Periods) : IGateLoad
{
    private const double Gravity = 9.81;

    public double Pressure(double time, double height)
    {
        var sum = 0.0;
        foreach (var period in Periods)
        {
            var omega = 2 * Math.PI / period;
            sum += Math.Sin(omega * time) * Math.Exp(-omega * omega / Gravity * (Depth - height));
        }
        return Amplitude / Periods.Count * sum;
    }
}
