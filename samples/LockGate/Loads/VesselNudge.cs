namespace LockGate.Loads;

/// <summary>A vessel leaning on the fender: a sine-squared pulse in time, a bell over the height, again and again at a period.</summary>
/// <param name="Force">Peak force, N per metre of leaf width; its sign is the direction (above 0: towards the water).</param>
/// <param name="Height">Height of the fender above the sill, m.</param>
/// <param name="Spread">Standard width of the bell, m, above 0.</param>
/// <param name="First">Beginning of the first nudge, s.</param>
/// <param name="Duration">Length of one nudge, s, above 0.</param>
/// <param name="Period">From one nudge to the next, s, above <paramref name="Duration"/>; infinity for a single one.</param>
public sealed record VesselNudge(double Force, double Height, double Spread, double First, double Duration, double Period) : IGateLoad
{
    public double Pressure(double time, double height)
    {
        var since = time - First;
        if (since < 0) return 0;
        if (double.IsFinite(Period)) since -= Math.Floor(since / Period) * Period;
        if (since > Duration) return 0;
        var pulse = Math.Sin(Math.PI * since / Duration);
        var bell = (height - Height) / Spread;
        return Force * pulse * pulse * Math.Exp(-0.5 * bell * bell) / (Spread * Math.Sqrt(2 * Math.PI));
    }
}
