namespace CouplingWatch.Numerics.Sequences;

/// <summary>
/// How far a converging fixed-point iteration still is from its limit, from its rate and its last increment.
/// Source: Banach's fixed-point theorem (any analysis text).
/// </summary>
public static class FixedPointError
{
    /// <summary>Bound after the fact: rate/(1 − rate)·‖x_k − x_{k−1}‖ ≥ ‖x_k − x*‖ for a contraction with that rate.</summary>
    /// <param name="rate">0 ≤ rate; 1 or more gives infinity: no bound.</param>
    /// <param name="increment">‖x_k − x_{k−1}‖, 0 or more.</param>
    public static double Bound(double rate, double increment)
    {
        RequireIncrement(increment);
        if (!(rate >= 0)) throw new ArgumentOutOfRangeException(nameof(rate), rate, "must be 0 or more; give its magnitude");
        return rate < 1 ? rate / (1 - rate) * increment : double.PositiveInfinity;
    }

    /// <summary>Bound beforehand: rateᵏ/(1 − rate)·‖x₁ − x₀‖ ≥ ‖x_k − x*‖.</summary>
    /// <param name="rate">0 ≤ rate; 1 or more gives infinity.</param>
    /// <param name="firstIncrement">‖x₁ − x₀‖.</param>
    /// <param name="iteration">k, 0 or more.</param>
    public static double BoundBeforehand(double rate, double firstIncrement, int iteration)
    {
        RequireIncrement(firstIncrement);
        ArgumentOutOfRangeException.ThrowIfNegative(iteration);
        if (!(rate >= 0)) throw new ArgumentOutOfRangeException(nameof(rate), rate, "must be 0 or more; give its magnitude");
        return rate < 1 ? Math.Pow(rate, iteration) / (1 - rate) * firstIncrement : double.PositiveInfinity;
    }

    /// <summary>Estimate with a signed rate: |rate/(1 − rate)|·increment. Sharp for one dominant rate of either sign; no bound.</summary>
    /// <param name="signedRate">Above −1 and below 1; otherwise infinity.</param>
    /// <param name="increment">‖x_k − x_{k−1}‖, 0 or more.</param>
    public static double Estimate(double signedRate, double increment)
    {
        RequireIncrement(increment);
        if (double.IsNaN(signedRate)) return double.NaN;
        return Math.Abs(signedRate) < 1 ? Math.Abs(signedRate / (1 - signedRate)) * increment : double.PositiveInfinity;
    }

    private static void RequireIncrement(double increment)
    {
        if (!(increment >= 0)) throw new ArgumentOutOfRangeException(nameof(increment), increment, "must be 0 or more");
    }
}
