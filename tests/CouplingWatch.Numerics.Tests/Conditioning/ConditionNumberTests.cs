using CouplingWatch.Numerics.Conditioning;
using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Tests.Secants;
using CsCheck;

namespace CouplingWatch.Numerics.Tests.Conditioning;

public class ConditionNumberTests
{
    [Fact]
    public void Special_matrices_have_plain_answers()
    {
        Assert.Equal(new ConditionNumber(1, 1), ConditionNumber.Of(SmallMatrix.Identity(4)));
        Assert.Equal(1e6, ConditionNumber.Of(SmallMatrix.FromColumns([[1e6, 0], [0, 1]])).Raw, 1e-6);
        Assert.Equal(1, ConditionNumber.Of(SmallMatrix.FromColumns([[1e6, 0], [0, 1]])).UnitColumns, 1e-12);
        Assert.Equal(double.PositiveInfinity, ConditionNumber.Of(SmallMatrix.FromColumns([[1, 1], [0, 0]])).UnitColumns);
        Assert.Equal(double.PositiveInfinity, ConditionNumber.Of(new SmallMatrix(1, 2)).Raw);
        Assert.True(double.IsNaN(ConditionNumber.Of(new SmallMatrix(3, 0)).Raw));
        Assert.True(double.IsNaN(ConditionNumber.Of(SmallMatrix.FromColumns([[1, double.NaN], [0, 1]])).Raw));
    }

    [Fact]
    public void Unit_columns_never_do_worse_than_the_square_root_of_the_columns() =>
        Gen.Select(Gen.ULong, Gen.Int[2, 9]).Sample((seed, count) =>
        {
            // Source: Numer. Math. 14 (1969) 14–23: within √columns of the best scaling, so of the raw one too.
            ConditionNumber condition = ConditionNumber.Of(SmallMatrix.FromColumns(Columns.Leaning(seed, 12, count, 0.1, 0.3)));
            Assert.True(condition.UnitColumns <= Math.Sqrt(count) * condition.Raw * (1 + 1e-10));
        }, iter: 200);

    [Fact]
    public void Incremental_estimates_never_cross_the_truth() =>
        Gen.Select(Gen.ULong, Gen.Int[1, 14], Gen.Double[-4, 0]).Sample((seed, count, lean) =>
        {
            SmallMatrix r = Columns.Basis(Columns.Leaning(seed, 20, count, Math.Pow(10, lean), 0.6)).Coefficients();
            var estimate = new IncrementalCondition();
            double before = double.PositiveInfinity;
            for (int k = 0; k < count; k++)
            {
                estimate.Add(r.Column(k)[..(k + 1)]);
                Assert.True(estimate.SmallestEstimate <= before * (1 + 1e-12));
                before = estimate.SmallestEstimate;
            }
            double[] truth = TruncatedSvd.Of(r, 0).SingularValues;
            Assert.True(estimate.SmallestEstimate >= truth[^1] * (1 - 1e-9));
            Assert.True(estimate.LargestEstimate <= truth[0] * (1 + 1e-12));
            Assert.True(estimate.Condition <= truth[0] / truth[^1] * (1 + 1e-9));
        }, iter: 300);

    [Fact]
    public void A_zero_pivot_is_an_infinite_condition()
    {
        var estimate = new IncrementalCondition();
        estimate.Add([2]);
        estimate.Add([1, 0]);
        Assert.Equal(0, estimate.SmallestEstimate);
        Assert.Equal(double.PositiveInfinity, estimate.Condition);
        Assert.Throws<ArgumentException>(() => estimate.Add([1, 2]));
        Assert.Throws<ArgumentException>(() => estimate.Add([1, 2, double.NaN]));
    }
}
