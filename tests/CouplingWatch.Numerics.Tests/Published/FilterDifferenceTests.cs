using CouplingWatch.Numerics.Conditioning;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Tests.Secants;

namespace CouplingWatch.Numerics.Tests.Published;

/// <summary>
/// Where the two filters decide differently, on the matrices of tests/reference/qr-cases. Criteria: Computers and Structures 87
/// (2009) 793–801 and 171 (2016) 9–17 (from memory); the kept columns and their condition numbers computed once with NumPy.
/// </summary>
public class FilterDifferenceTests
{
    [Theory]
    // Graded, healthy columns: the pivot rule drops the two newest directions, the own-norm rule none.
    [InlineData("Q2", SecantFilter.PivotRatio, 1e-5, new[] { 2, 3, 4 }, 1.001e4)]
    [InlineData("Q2", SecantFilter.OwnNorm, 1e-5, new[] { 0, 1, 2, 3, 4 }, 1.001e8)]
    [InlineData("Q2", SecantFilter.PivotRatio, 1e-10, new[] { 0, 1, 2, 3, 4 }, 1.001e8)]
    [InlineData("Q2", SecantFilter.PivotRatio, 1e-2, new[] { 4 }, 1)]
    // Two dependent columns.
    [InlineData("Q3", SecantFilter.PivotRatio, 1e-8, new[] { 0, 1, 2, 4 }, 3.507e6)]
    [InlineData("Q3", SecantFilter.OwnNorm, 1e-8, new[] { 0, 1, 2, 4 }, 3.507e6)]
    [InlineData("Q3", SecantFilter.PivotRatio, 1e-5, new[] { 0, 1, 2 }, 4.443)]
    [InlineData("Q3", SecantFilter.OwnNorm, 1e-5, new[] { 0, 1, 2 }, 4.443)]
    // A duplicate and a vanishing column: the newest offender first keeps the good one; own-norm keeps the vanishing one.
    [InlineData("Q4", SecantFilter.PivotRatio, 1e-8, new[] { 0, 1, 4 }, 4.443)]
    [InlineData("Q4", SecantFilter.OwnNorm, 1e-8, new[] { 0, 1, 3 }, 3.340e16)]
    public void Each_rule_keeps_the_published_columns(string name, SecantFilter rule, double threshold, int[] kept, double condition)
    {
        SecantBasis basis = QrCaseTests.BasisOldestFirst(QrCase.Load(name));
        FilterOutcome outcome = ColumnFilter.Apply(basis, Columns.NewestFirst(basis), rule, threshold);
        int newest = basis.ColumnCount - 1;
        Assert.Equal(kept, outcome.Kept.ToArray().Select(index => newest - index));
        Assert.Equal(1, ConditionNumber.Of(outcome.Triangle()).Raw / condition, 1e-3);
    }

    [Fact]
    public void A_raw_condition_alarm_on_graded_columns_would_be_a_scaling_artefact()
    {
        ConditionNumber condition = ConditionNumber.Of(QrCaseTests.NewestFirstTriangle(QrCase.Load("Q2")));
        Assert.True(condition.Raw > 1e8);
        Assert.Equal(1.0742, condition.UnitColumns, 1e-4);
    }
}
