using CouplingWatch.Numerics.Conditioning;
using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Tests.Secants;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Tests.Published;

/// <summary>
/// Reference values: LAPACK dgeqrf and dgesvd, SciPy qr_delete and qr_insert on the matrices of tests/reference/qr-cases. Deleting
/// and inserting: Golub and Van Loan, Matrix Computations, 4th ed., §6.5.
/// </summary>
public class QrCaseTests
{
    [Theory]
    [InlineData("Q1", new[] { 2.44948974278318, 2.44948974278318, 2.44948974278318, 2.44948974278318 })]
    [InlineData("Q2", new[] { 2.46170672501823e-08, 2.44191188034585e-06, 2.46158166291828e-04, 2.35231968330752e-02, 2.46016310418915 })]
    [InlineData("Q3", new[] { 2.44948974278318, 2.44948974278318, 7.33423792967031e-01, 2.44646836710382e-09, 2.44887184540751e-06 })]
    public void Diagonal_of_the_triangle_is_that_of_a_fresh_factorisation(string name, double[] diagonal)
    {
        double[][] columns = QrCase.Load(name);
        SmallMatrix r = NewestFirstTriangle(columns);
        for (int j = 0; j < diagonal.Length; j++)
        {
            // A new direction is known to a rounding error of its own column, not of itself.
            double norm = LongVector.Norm(columns[j]);
            Assert.Equal(diagonal[j], r[j, j], (1e-14 * diagonal[j]) + (2e-15 * norm));
        }
    }

    [Theory]
    [InlineData("Q2", 1.0006274970e8, 1.0741873231)]
    [InlineData("Q3", 3.3234738301e9, 3.3737012322e9)]
    [InlineData("Q1", 1, 1)]
    public void Condition_numbers_raw_and_with_unit_columns(string name, double raw, double unitColumns)
    {
        ConditionNumber condition = ConditionNumber.Of(NewestFirstTriangle(QrCase.Load(name)));
        Assert.Equal(1, condition.Raw / raw, 1e-6);
        Assert.Equal(1, condition.UnitColumns / unitColumns, 1e-6);
    }

    [Fact]
    public void Numeric_rank_of_a_duplicate_and_a_vanishing_parallel_column_is_three()
    {
        SecantBasis basis = BasisOldestFirst(QrCase.Load("Q4"));
        Assert.Equal(5, basis.ColumnCount);
        Assert.Equal(3, basis.Rank);
    }

    [Fact]
    public void Singular_values_come_from_the_small_matrix()
    {
        double[] expected = [4.69430288620259, 3.02112948481886, 1.27935256725482, 1.02873228948652e-06, 1.41246873789161e-09];
        double[] values = TruncatedSvd.Of(NewestFirstTriangle(QrCase.Load("Q3")), 0).SingularValues;
        for (int i = 0; i < expected.Length; i++) Assert.Equal(expected[i], values[i], 3e-15 * expected[0]);
    }

    [Fact]
    public void Deleting_a_column_leaves_the_published_diagonal()
    {
        SecantBasis basis = BasisOldestFirst(QrCase.Load("Q1"));
        basis.RemoveAt(2); // column 1 of the file: arrival order is oldest first
        SmallMatrix r = ColumnFilter.Apply(basis, [2, 1, 0], SecantFilter.None, 0).Triangle();
        for (int j = 0; j < 3; j++) Assert.Equal(2.449489742783178, r[j, j], 1e-13);
    }

    [Fact]
    public void Inserting_a_column_in_front_leaves_the_published_diagonal()
    {
        SecantBasis basis = BasisOldestFirst(QrCase.Load("Q1"));
        basis.Append([.. Enumerable.Range(0, 12).Select(i => Math.Exp(-(i + 0.5) / 12))]);
        SmallMatrix r = ColumnFilter.Apply(basis, [4, 3, 2, 1, 0], SecantFilter.None, 0).Triangle();
        double[] expected = [2.276398151858104, 1.276384005633953, 2.234124845554316, 1.824854145988111, 2.322140692587155];
        for (int j = 0; j < 5; j++) Assert.Equal(expected[j], r[j, j], 1e-13);
    }

    internal static SecantBasis BasisOldestFirst(double[][] columns) => Columns.Basis([.. columns.Reverse()]);

    internal static SmallMatrix NewestFirstTriangle(double[][] columns)
    {
        SecantBasis basis = BasisOldestFirst(columns);
        return ColumnFilter.Apply(basis, Columns.NewestFirst(basis), SecantFilter.None, 0).Triangle();
    }
}
