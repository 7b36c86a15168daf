namespace CouplingWatch.Numerics.Sequences;

/// <summary>
/// Two-sided tabular CUSUM of standardised values u = (x − mean)/deviation: high ← max(0, high + u − allowance),
/// low ← max(0, low − u − allowance). A side signals when it exceeds the decision limit the caller holds it against.
/// Source: "Continuous inspection schemes", Biometrika 41 (1954) 100–115 (from memory).
/// </summary>
public sealed class Cusum
{
    /// <summary>Starts at zero on both sides.</summary>
    /// <param name="mean">Mean in control, finite.</param>
    /// <param name="deviation">Standard deviation in control, above 0.</param>
    /// <param name="allowance">Slack k in deviations, 0 or more; half the shift to be found.</param>
    public Cusum(double mean, double deviation, double allowance = 0.5)
    {
        if (!double.IsFinite(mean)) throw new ArgumentOutOfRangeException(nameof(mean), mean, "must be finite");
        if (!(deviation > 0) || !double.IsFinite(deviation)) throw new ArgumentOutOfRangeException(nameof(deviation), deviation, "must be above 0 and finite");
        if (!(allowance >= 0) || !double.IsFinite(allowance)) throw new ArgumentOutOfRangeException(nameof(allowance), allowance, "must be 0 or more and finite");
        Mean = mean;
        Deviation = deviation;
        Allowance = allowance;
    }

    /// <summary>Mean in control.</summary>
    public double Mean { get; }

    /// <summary>Standard deviation in control.</summary>
    public double Deviation { get; }

    /// <summary>Slack in deviations.</summary>
    public double Allowance { get; }

    /// <summary>The upper sum, in deviations.</summary>
    public double High { get; private set; }

    /// <summary>The lower sum, in deviations.</summary>
    public double Low { get; private set; }

    /// <summary>Values since the upper sum was last zero: the shift began that many values ago.</summary>
    public int HighRun { get; private set; }

    /// <summary>Values since the lower sum was last zero.</summary>
    public int LowRun { get; private set; }

    /// <summary>Estimated mean after an upward shift, in the units of the values; NaN while the upper sum is zero.</summary>
    public double ShiftedMeanHigh => HighRun > 0 ? Mean + (Deviation * (Allowance + (High / HighRun))) : double.NaN;

    /// <summary>Takes in a value. Not-a-number is refused so that one bad value cannot silence the sum for ever.</summary>
    public void Add(double value)
    {
        if (double.IsNaN(value)) throw new ArgumentException("NaN cannot be summed", nameof(value));
        double u = (value - Mean) / Deviation;
        High = Math.Max(0, High + u - Allowance);
        Low = Math.Max(0, Low - u - Allowance);
        HighRun = High > 0 ? HighRun + 1 : 0;
        LowRun = Low > 0 ? LowRun + 1 : 0;
    }

    /// <summary>Sets both sums to zero.</summary>
    public void Reset() => (High, Low, HighRun, LowRun) = (0, 0, 0, 0);
}
