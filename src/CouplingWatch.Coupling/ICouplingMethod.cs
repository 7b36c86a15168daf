namespace CouplingWatch.Coupling;

/// <summary>
/// A published method that turns the residual r = x̃ − x and the output x̃ of one pass into the next interface vector, step by step.
/// Deterministic: the same calls give the same vectors, bit for bit. Not safe for use by several threads at once.
/// </summary>
public interface ICouplingMethod
{
    /// <summary>Length N of the interface vector.</summary>
    int Size { get; }

    /// <summary>Begins a time step, or a further attempt at it. An unfinished step before it lends nothing.</summary>
    /// <param name="step">Number of the step, 0 or more; names its columns.</param>
    /// <param name="attempt">Attempt at the step, counted from 0.</param>
    void BeginStep(int step, int attempt = 0);

    /// <summary>One update: the pass just made gives the vector of the next pass.</summary>
    /// <param name="residual">r, length N.</param>
    /// <param name="output">x̃, length N.</param>
    /// <param name="next">Receives the next interface vector, length N. Not finite when the inputs are not.</param>
    /// <exception cref="ArgumentException">A length differs from N.</exception>
    /// <exception cref="InvalidOperationException">No step has begun.</exception>
    void Update(ReadOnlySpan<double> residual, ReadOnlySpan<double> output, Span<double> next);

    /// <summary>Takes the pair of the last pass, after which no update is made, so that its column is kept too.</summary>
    void Observe(ReadOnlySpan<double> residual, ReadOnlySpan<double> output);

    /// <summary>What the latest <see cref="Update"/> did; null before the first of a step.</summary>
    UpdateReport? Report { get; }

    /// <summary>Ends the step. Only a converged or capped step should lend its columns to later steps.</summary>
    void EndStep(bool lendColumns);
}
