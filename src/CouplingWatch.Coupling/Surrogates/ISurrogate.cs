namespace CouplingWatch.Coupling.Surrogates;

/// <summary>
/// A cheap stand-in for the derivative of the pass, written as dx̃ = J_s dr: which change of the output belongs to a change of the
/// residual. Linear in dr as long as a step is in hand.
/// </summary>
public interface ISurrogate
{
    /// <summary>Adds J_s dr to <paramref name="outputChange"/>.</summary>
    /// <param name="residualChange">dr, length N.</param>
    /// <param name="outputChange">Length N; the answer is added.</param>
    /// <returns>Evaluations of the surrogate's own pass, 0 or more.</returns>
    int Add(ReadOnlySpan<double> residualChange, Span<double> outputChange);
}
