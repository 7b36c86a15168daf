namespace CouplingWatch.Numerics.Sequences;

/// <summary>
/// Exponentially weighted moving average z ← λx + (1 − λ)z, started at the mean, with its control limits.
/// Source: "Exponentially weighted moving average control schemes: properties and enhancements", Technometrics 32 (1990) 1–12
/// (from memory).
/// </summary>
public sealed class Ewma
{
    private double memory = 1;

    /// <summary>Starts at the mean.</summary>
    /// <param name="mean">Mean in control, finite.</param>
    /// <param name="deviation">Standard deviation in control, above 0.</param>
    /// <param name="weight">λ, 0 &lt; λ ≤ 1.</param>
    public Ewma(double mean, double deviation, double weight)
    {
        if (!double.IsFinite(mean)) throw new ArgumentOutOfRangeException(nameof(mean), mean, "must be finite");
        if (!(deviation > 0) || !double.IsFinite(deviation)) throw new ArgumentOutOfRangeException(nameof(deviation), deviation, "must be above 0 and finite");
        if (!(weight > 0 && weight <= 1)) throw new ArgumentOutOfRangeException(nameof(weight), weight, "must be above 0 and at most 1");
        Mean = mean;
        Deviation = deviation;
        Weight = weight;
        Value = mean;
    }

    /// <summary>Mean in control.</summary>
    public double Mean { get; }

    /// <summary>Standard deviation in control.</summary>
    public double Deviation { get; }

    /// <summary>Weight λ of the newest value.</summary>
    public double Weight { get; }

    /// <summary>The average now, in the units of the values.</summary>
    public double Value { get; private set; }

    /// <summary>Values taken in.</summary>
    public long Count { get; private set; }

    /// <summary>Half width of the limits at this count: factor · deviation · √(λ/(2 − λ)·(1 − (1 − λ)^2i)).</summary>
    /// <param name="factor">L, in deviations of the average.</param>
    public double LimitHalfWidth(double factor) => factor * Deviation * Math.Sqrt(Weight / (2 - Weight) * (1 - (memory * memory)));

    /// <summary>Whether the average stands outside its limits.</summary>
    public bool IsOutside(double factor) => Math.Abs(Value - Mean) > LimitHalfWidth(factor);

    /// <summary>Takes in a value; NaN is refused.</summary>
    public void Add(double value)
    {
        if (double.IsNaN(value)) throw new ArgumentException("NaN cannot be averaged", nameof(value));
        Value += Weight * (value - Value);
        memory *= 1 - Weight;
        Count++;
    }
}
