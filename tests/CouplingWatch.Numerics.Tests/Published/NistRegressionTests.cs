using CouplingWatch.Numerics.Conditioning;
using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;
using MathNet.Numerics.LinearAlgebra.Double;

namespace CouplingWatch.Numerics.Tests.Published;

/// <summary>
/// Source: NIST Statistical Reference Datasets, linear least squares regression, certified values inside the files of
/// tests/reference/nist-strd. The regression goes the way of a secant update: columns appended one by one, response projected,
/// coefficients from the small triangle.
/// </summary>
public class NistRegressionTests
{
    [Theory]
    [InlineData("Norris", 10)]
    [InlineData("Pontius", 10)]
    [InlineData("NoInt1", 10)]
    [InlineData("NoInt2", 10)]
    [InlineData("Filip", 5)]
    [InlineData("Longley", 8)]
    [InlineData("Wampler1", 7)]
    [InlineData("Wampler2", 7)]
    [InlineData("Wampler3", 7)]
    [InlineData("Wampler4", 5.5)]
    [InlineData("Wampler5", 3.5)]
    public void Certified_coefficients_are_reached_to_the_stated_digits(string name, double digits)
    {
        NistDataset data = NistDataset.Load(name);
        var (coefficients, _, _) = Fit(data);
        Assert.Equal(data.Coefficients.Length, coefficients.Length);
        for (int j = 0; j < coefficients.Length; j++)
            Assert.True(Digits(coefficients[j], data.Coefficients[j]) >= digits, $"{name} B{j}: {coefficients[j]:R} against {data.Coefficients[j]:R}");
    }

    [Theory]
    [InlineData("Norris", 10)]
    [InlineData("Pontius", 10)]
    [InlineData("NoInt1", 10)]
    [InlineData("NoInt2", 10)]
    [InlineData("Filip", 5)]
    [InlineData("Longley", 8)]
    [InlineData("Wampler3", 9)]
    [InlineData("Wampler4", 9)]
    [InlineData("Wampler5", 9)]
    public void Certified_standard_deviations_are_reached_to_the_stated_digits(string name, double digits)
    {
        NistDataset data = NistDataset.Load(name);
        var (_, residual, deviations) = Fit(data);
        Assert.True(Digits(residual, data.ResidualDeviation) >= digits, $"{name}: {residual:R} against {data.ResidualDeviation:R}");
        for (int j = 0; j < deviations.Length; j++)
            Assert.True(Digits(deviations[j], data.CoefficientDeviations[j]) >= digits, $"{name} B{j}: {deviations[j]:R} against {data.CoefficientDeviations[j]:R}");
    }

    [Theory]
    [InlineData("Longley", 4.859257e9, 4.327504e4)]
    [InlineData("Filip", 1.767969e15, 5.206821e9)]
    [InlineData("Wampler1", 6.398930e6, 2.220208e3)]
    public void Condition_numbers_of_the_design_come_from_the_small_matrix(string name, double raw, double unitColumns)
    {
        // Reference: LAPACK dgesvd on the design matrix; raw 1.8e15 is beyond what double precision resolves to more than a few per cent.
        SecantBasis basis = BasisOf(NistDataset.Load(name));
        ConditionNumber condition = ConditionNumber.Of(basis.Coefficients());
        Assert.Equal(1, condition.Raw / raw, raw > 1e14 ? 0.1 : 1e-5);
        Assert.Equal(1, condition.UnitColumns / unitColumns, 1e-4);
    }

    [Fact]
    public void Normal_equations_fail_where_the_orthogonal_basis_does_not()
    {
        NistDataset data = NistDataset.Load("Filip");
        var x = DenseMatrix.OfColumnArrays(data.Columns);
        double[] solution = (x.Transpose() * x).Solve(x.Transpose() * new DenseVector(data.Response)).ToArray();
        double worst = solution.Select((value, j) => Digits(value, data.Coefficients[j])).Min();
        Assert.True(worst < 3, $"normal equations reached {worst} digits");
    }

    private static (double[] Coefficients, double ResidualDeviation, double[] Deviations) Fit(NistDataset data)
    {
        SecantBasis basis = BasisOf(data);
        int p = data.Columns.Length;
        int[] order = [.. Enumerable.Range(0, p).Reverse()];
        FilterOutcome filter = ColumnFilter.Apply(basis, order, SecantFilter.None, 0);
        Assert.Equal(p, filter.Kept.Length);

        var projection = new double[basis.Rank];
        basis.Project([.. data.Response.Select(y => -y)], projection, out double outside);
        SecantFit fit = SecantFit.Solve(filter, projection, outside);
        double[] coefficients = [.. fit.Alpha.Reverse()];
        double residual = fit.UncoveredNorm / Math.Sqrt(data.Response.Length - p);
        return (coefficients, residual, Deviations(filter.Triangle(), residual));
    }

    /// <summary>Residual deviation times the row norms of R⁻¹, in the order of the parameters.</summary>
    private static double[] Deviations(SmallMatrix r, double residual)
    {
        int p = r.Columns;
        var inverse = new DenseMatrix(p, p);
        for (int j = p - 1; j >= 0; j--)
            for (int column = j; column < p; column++)
            {
                double sum = j == column ? 1 : 0;
                for (int k = j + 1; k <= column; k++) sum -= r[j, k] * inverse[k, column];
                inverse[j, column] = sum / r[j, j];
            }
        return [.. Enumerable.Range(0, p).Select(i => residual * inverse.Row(i).L2Norm()).Reverse()];
    }

    private static SecantBasis BasisOf(NistDataset data)
    {
        var basis = new SecantBasis(data.Response.Length, 2);
        foreach (double[] column in data.Columns) Assert.True(basis.Append(column).Independent);
        return basis;
    }

    private static double Digits(double value, double certified) =>
        value == certified ? 15 : Math.Min(15, -Math.Log10(Math.Abs(value - certified) / Math.Abs(certified)));
}
