using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Matrices;

/// <summary>
/// Orthonormal basis of the space of many long vectors, from the singular value decomposition of their matrix with a
/// relative cut. The long vectors are factored once (Gram–Schmidt twice); the decomposition happens on the small triangle,
/// so singular values are right down to 1e-15 of the largest.
/// </summary>
public sealed class ColumnSpace
{
    private readonly double[][] directions;

    private ColumnSpace(double[][] directions, double[] singularValues)
    {
        this.directions = directions;
        SingularValues = singularValues;
    }

    /// <summary>Number of basis vectors.</summary>
    public int Dimension => directions.Length;

    /// <summary>All singular values, falling; those kept come first.</summary>
    public double[] SingularValues { get; }

    /// <summary>Basis vector <paramref name="index"/>, by falling singular value.</summary>
    public ReadOnlySpan<double> Direction(int index) => directions[index];

    /// <summary>Builds the space.</summary>
    /// <param name="vectors">Finite vectors of one length; zero vectors do not count. Cost about 6·length·rank·count.</param>
    /// <param name="cut">Keep σ &gt; cut·σ_max; 0 ≤ cut &lt; 1.</param>
    /// <exception cref="ArgumentException">No vector, lengths that differ, or an entry that is not finite.</exception>
    public static ColumnSpace Of(IReadOnlyList<double[]> vectors, double cut)
    {
        ArgumentNullException.ThrowIfNull(vectors);
        if (vectors.Count == 0) throw new ArgumentException("at least one vector is needed", nameof(vectors));
        var basis = new SecantBasis(vectors[0].Length, Math.Min(vectors.Count, vectors[0].Length));
        for (int j = 0; j < vectors.Count; j++)
            if (basis.Append(vectors[j]).Outcome == AppendOutcome.NotFinite)
                throw new ArgumentException($"vector {j} holds an entry that is not finite", nameof(vectors));
        if (basis.Rank == 0) return new ColumnSpace([], []);
        TruncatedSvd svd = TruncatedSvd.Of(basis.Coefficients(), cut);
        var directions = new double[svd.Rank][];
        for (int k = 0; k < svd.Rank; k++)
        {
            directions[k] = new double[basis.RowCount];
            for (int i = 0; i < basis.Rank; i++) LongVector.AddScaled(directions[k], svd.Left[i, k], basis.Direction(i));
        }
        return new ColumnSpace(directions, svd.SingularValues);
    }

    /// <summary>The coordinates Qᵀv of a vector; <see cref="Dimension"/> entries.</summary>
    public double[] Coordinates(ReadOnlySpan<double> vector)
    {
        var result = new double[Dimension];
        for (int k = 0; k < Dimension; k++) result[k] = LongVector.Dot(directions[k], vector);
        return result;
    }
}
