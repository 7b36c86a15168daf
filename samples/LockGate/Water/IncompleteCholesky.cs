namespace LockGate.Water;

/// <summary>
/// Modified incomplete Cholesky factor without fill of the five-point matrix of a <see cref="ChamberMesh"/>, as preconditioner: the
/// fill that is dropped is taken from the diagonal (nearly all of it, which keeps the pivots above 0).
/// Sources (from memory): "An iterative solution method for linear systems of which the coefficient matrix is a symmetric M-matrix",
/// Mathematics of Computation 31 (1977) 148-162; "A class of first order factorization methods", BIT 18 (1978) 142-156.
/// </summary>
internal sealed class IncompleteCholesky
{
    private const double Modified = 0.97;
    private readonly int along;
    private readonly double east;
    private readonly double north;
    private readonly double[] inversePivot;

    /// <param name="diagonal">Diagonal of the matrix, one entry a cell, above 0.</param>
    /// <param name="along">Cells of one level.</param>
    /// <param name="east">Off-diagonal magnitude between neighbours of one level (the entry is −<paramref name="east"/>).</param>
    /// <param name="north">Off-diagonal magnitude between levels.</param>
    public IncompleteCholesky(double[] diagonal, int along, double east, double north)
    {
        this.along = along;
        this.east = east;
        this.north = north;
        inversePivot = new double[diagonal.Length];
        for (var c = 0; c < diagonal.Length; c++)
        {
            var pivot = diagonal[c];
            var fillAbove = c + along < diagonal.Length ? Modified * north : 0;
            if (c % along > 0) pivot -= east * (east + fillAbove) * inversePivot[c - 1];
            if (c >= along) pivot -= north * (north + ((c + 1) % along > 0 ? Modified * east : 0)) * inversePivot[c - along];
            inversePivot[c] = 1 / pivot;
        }
    }

    /// <summary>z = (LDLᵀ)⁻¹ r: forward, then backward substitution. Cost 8 operations a cell.</summary>
    public void Solve(double[] r, double[] z)
    {
        var n = r.Length;
        for (var row = 0; row < n; row += along)
        {
            var left = 0.0;
            for (var c = row; c < row + along; c++)
            {
                var value = r[c] + east * left;
                if (row > 0) value += north * z[c - along];
                left = z[c] = value * inversePivot[c];
            }
        }
        for (var row = n - along; row >= 0; row -= along)
        {
            var right = 0.0;
            for (var c = row + along - 1; c >= row; c--)
            {
                var carried = east * right;
                if (row + along < n) carried += north * z[c + along];
                right = z[c] += carried * inversePivot[c];
            }
        }
    }
}
