using CouplingWatch.Wire;

namespace CouplingWatch.Components.Spectrum;

/// <summary>Where values of the complex plane lie on a drawing, to one scale on both axes.</summary>
/// <param name="Left">Real part at the left edge.</param>
/// <param name="Unit">Pixels of one unit, on both axes.</param>
public sealed record PlaneScale(double Left, double Right, double Unit, double Width, double Height)
{
    private const double Margin = 24;

    /// <summary>Holds every value and the right end of the tamed disc; imaginary parts beyond the height are drawn at its edge.</summary>
    /// <param name="relaxation">Relaxation in force; null when not declared.</param>
    public static PlaneScale Of(IReadOnlyList<RitzValue> values, double? relaxation, double width, double height)
    {
        ArgumentNullException.ThrowIfNull(values);
        var reals = values.Select(v => v.Real).Where(double.IsFinite).ToArray();
        double low = reals.Length > 0 ? Math.Min(reals.Min(), 0) : 0, high = reals.Length > 0 ? Math.Max(reals.Max(), 1) : 1;
        if (relaxation is > 0 and var w) low = Math.Min(low, Math.Max(1 - 2 / w, low - 1.2 * (high - low) - 4));
        var span = Math.Max(high - low, 2);
        low -= 0.04 * span;
        high += 0.04 * span;
        return new PlaneScale(low, high, (width - 2 * Margin) / (high - low), width, height);
    }

    public double X(double real) => Margin + (real - Left) * Unit;

    public double Y(double imaginary) => Height / 2 - imaginary * Unit;

    /// <summary>True where the value lies above or below the drawing.</summary>
    public bool Beyond(double imaginary) => Math.Abs(imaginary * Unit) > Height / 2 - 6;

    /// <summary>Round real parts to name on the axis, at most <paramref name="most"/> of them.</summary>
    public IReadOnlyList<double> Ticks(int most)
    {
        var raw = (Right - Left) / Math.Max(1, most);
        var scale = Math.Pow(10, Math.Floor(Math.Log10(raw)));
        var step = new[] { 1.0, 2, 5, 10 }.Select(f => f * scale).First(s => s >= raw * 0.999);
        var ticks = new List<double>();
        for (var i = (long)Math.Ceiling(Left / step); i * step <= Right; i++) ticks.Add(i * step);
        return ticks;
    }
}
