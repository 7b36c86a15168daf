using CouplingWatch.Numerics.Conditioning;
using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Tests.Secants;

namespace CouplingWatch.Numerics.Tests.Published;

/// <summary>
/// Condition numbers of matrices with known ones. Hilbert and Vandermonde values computed with 60 digits (mpmath); Läuchli:
/// closed form; Kahan: LAPACK and mpmath. Every matrix goes through the secant basis column by column.
/// </summary>
public class ReferenceMatrixTests
{
    [Theory]
    [InlineData(3, 524.056777586061)]
    [InlineData(4, 15513.7387389326)]
    [InlineData(5, 476607.250242561)]
    [InlineData(6, 14951058.6401312)]
    [InlineData(7, 475367354.988179)]
    [InlineData(8, 15257575741.6469)]
    [InlineData(9, 493154926971.542)]
    public void Hilbert_matrices_have_the_published_condition(int n, double expected) =>
        Assert.Equal(1, Condition(Hilbert(n)).Raw / expected, 1e-4);

    [Theory]
    [InlineData(10, 16026286870216.9)]
    [InlineData(11, 523067739242941.0)]
    [InlineData(12, 1.713228904697e16)]
    public void Large_Hilbert_matrices_have_it_to_the_order_of_magnitude(int n, double expected) =>
        Assert.InRange(Condition(Hilbert(n)).Raw / expected, 0.1, 10);

    [Theory]
    [InlineData(4, 98.8677385072)]
    [InlineData(6, 4924.37105661)]
    [InlineData(8, 267816.700908)]
    [InlineData(10, 15193229.6772)]
    [InlineData(12, 883478687.435)]
    public void Vandermonde_matrices_have_the_published_condition(int n, double expected) =>
        Assert.Equal(1, Condition([.. Enumerable.Range(0, n).Select(p => Enumerable.Range(0, n).Select(i => Math.Pow(i / (n - 1.0), p)).ToArray())]).Raw / expected, 1e-6);

    [Theory]
    [InlineData(3, 1e-3)]
    [InlineData(3, 1e-7)]
    [InlineData(5, 1e-8)]
    [InlineData(5, 1e-9)]
    public void Läuchli_matrices_have_their_closed_condition(int n, double mu) =>
        Assert.Equal(1, Condition(Läuchli(n, mu)).Raw / (Math.Sqrt(n + (mu * mu)) / mu), 1e-6);

    [Theory]
    [InlineData(10, 29.85262472, 1e-8)]
    [InlineData(30, 140083.52368, 1e-8)]
    [InlineData(50, 394748399.468, 1e-6)]
    public void Kahan_matrices_are_singular_where_their_diagonal_does_not_show_it(int n, double expected, double tolerance)
    {
        double s = Math.Sin(1.2);
        SecantBasis basis = Columns.Basis(Kahan(n));
        Assert.Equal(1, ConditionNumber.Of(basis.Coefficients()).Raw / expected, tolerance);
        // The last diagonal entry is s^(n−1): far above the smallest singular value, so κ must never be read from the diagonal.
        Assert.Equal(Math.Pow(s, n - 1), basis.ColumnCoefficients(n - 1)[n - 1], 1e-12);
    }

    [Fact]
    public void Unit_columns_bring_the_condition_down_as_published()
    {
        // Source: "Condition numbers and equilibration of matrices", Numer. Math. 14 (1969) 14–23; values computed with NumPy.
        ConditionNumber condition = Condition([[1, 1, 2, 0], [1e8, -1e8, 3e8, 1e8], [1e-6, 2e-6, 1e-6, 5e-6]]);
        Assert.Equal(1, condition.Raw / 6.7719917758e13, 1e-2);
        Assert.Equal(2.5993972977, condition.UnitColumns, 1e-9);
    }

    [Theory]
    [InlineData(3, 1e-7)]
    [InlineData(5, 1e-8)]
    [InlineData(40, 1e-8)]
    public void Directions_stay_orthogonal_where_one_pass_of_Gram_Schmidt_loses_everything(int n, double mu)
    {
        // Source: "The loss of orthogonality in the Gram–Schmidt orthogonalization process", Comput. Math. Appl. 50 (2005) 1069–1075.
        Assert.True(Columns.OrthogonalityLoss(Columns.Basis(Läuchli(n, mu))) < 2e-15);
    }

    internal static double[][] Hilbert(int n) =>
        [.. Enumerable.Range(0, n).Select(j => Enumerable.Range(0, n).Select(i => 1.0 / (i + j + 1)).ToArray())];

    internal static double[][] Kahan(int n)
    {
        double s = Math.Sin(1.2), c = Math.Cos(1.2);
        return [.. Enumerable.Range(0, n).Select(j => Enumerable.Range(0, n).Select(i => i > j ? 0 : Math.Pow(s, i) * (i == j ? 1 : -c)).ToArray())];
    }

    private static double[][] Läuchli(int n, double mu) =>
        [.. Enumerable.Range(0, n).Select(j => Enumerable.Range(0, n + 1).Select(i => i == 0 ? 1 : i == j + 1 ? mu : 0.0).ToArray())];

    private static ConditionNumber Condition(double[][] columns) => ConditionNumber.Of(Columns.Basis(columns).Coefficients());
}
