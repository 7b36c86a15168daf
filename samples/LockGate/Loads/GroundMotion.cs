namespace LockGate.Loads;

/// <summary>Horizontal acceleration of the lock's bed: a sum of sines under a slow swell.</summary>
/// <param name="Peak">Bound of the acceleration, m/s².</param>
/// <param name="Frequencies">Hz, each above 0; equal shares of the peak.</param>
/// <param name="Swell">Period of the swell, s, above 0.</param>
public sealed record GroundMotion(double Peak, IReadOnlyList<double> Frequencies, double Swell)
{
    /// <summary>Acceleration at <paramref name="time"/> (s), m/s², positive towards the water.</summary>
    public double Acceleration(double time)
    {
        var sum = 0.0;
        for (var i = 0; i < Frequencies.Count; i++) sum += Math.Sin(2 * Math.PI * Frequencies[i] * time + i);
        return Peak / Frequencies.Count * sum * Math.Abs(Math.Sin(Math.PI * time / Swell));
    }
}
