using CouplingWatch.Coupling.Surrogates;
using CouplingWatch.Records;

namespace CoupledRuns;

/// <summary>
/// Two black boxes and the interface vector between them, stepped in time: what a coupled code offers to the loop that couples it.
/// Not safe for use by several threads at once.
/// </summary>
public interface ICoupledProblem
{
    /// <summary>The two solvers, in the order in which a pass calls them.</summary>
    IReadOnlyList<SolverDeclaration> Solvers { get; }

    /// <summary>The interface field, with its unit, size and tolerance.</summary>
    FieldDeclaration Field { get; }

    /// <summary>Length of the interface vector.</summary>
    int Size { get; }

    /// <summary>Time reached by the accepted steps, s.</summary>
    double Time { get; }

    /// <summary>Wall seconds each solver took in the latest pass, in the order of <see cref="Solvers"/>.</summary>
    ReadOnlySpan<double> SolverSeconds { get; }

    /// <summary>The accepted interface vector the next step starts from; length <see cref="Size"/>.</summary>
    ReadOnlySpan<double> Accepted { get; }

    /// <summary>Prepares a step of <paramref name="timeStep"/> seconds from the accepted state.</summary>
    void BeginStep(double timeStep);

    /// <summary>One evaluation x̃ = H(x) of both solvers in turn. A non-finite <paramref name="x"/> gives a non-finite output, never an exception.</summary>
    void Pass(ReadOnlySpan<double> x, Span<double> output);

    /// <summary>Accepts <paramref name="x"/> as the end of the step.</summary>
    void Accept(ReadOnlySpan<double> x);

    /// <summary>A surrogate of the pass by name, or null when there is none of that name. It follows the step in hand.</summary>
    ISurrogate? Surrogate(string name) => null;

    /// <summary>Wall seconds the surrogate took in the latest update.</summary>
    double SurrogateSeconds => 0;

    /// <summary>Coordinates of one entry of the interface vector, m.</summary>
    double[] PlaceOf(int index);
}
