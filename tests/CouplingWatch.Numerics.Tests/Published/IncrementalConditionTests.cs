using CouplingWatch.Numerics.Conditioning;
using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Tests.Secants;

namespace CouplingWatch.Numerics.Tests.Published;

/// <summary>
/// Source: "Incremental condition estimation", SIAM J. Matrix Anal. Appl. 11 (1990) 312–322. Values after every column from
/// LAPACK dlaic1 (estimates) and dgesvd (true ones).
/// </summary>
public class IncrementalConditionTests
{
    public static TheoryData<string, double[], double[]> Published => new()
    {
        { "Q3", [2.4494897428, 2.4494897428, 6.7609409813e-01, 2.2708792101e-09, 2.2708757423e-09], [2.4494897428, 2.4494897428, 2.6346312822, 3.5879942523, 3.6132912037] },
        { "Q2", [2.4617067250e-08, 2.4617022373e-08, 2.4615816625e-08, 2.4602569384e-08, 2.4601631044e-08], [2.4617067250e-08, 2.4419163320e-06, 2.4615861508e-04, 2.3535926119e-02, 2.4614880690] },
        { "Hilbert", [1.2212243401, 1.1990719760e-01, 6.5839789065e-03, 2.6004686183e-04, 7.4343023445e-06, 1.3661430045e-07], [1.2212243401, 1.4102511142, 1.5000839970, 1.5534387503, 1.5890818155, 1.6146859712] },
        { "Kahan", [1, 7.9852504377e-01, 6.2373003494e-01, 4.7594395594e-01, 3.5483749299e-01, 2.5891083440e-01, 1.8545064914e-01, 1.3088946860e-01, 9.1378600319e-02, 6.3313808113e-02], [1, 1.1672008201, 1.1781731758, 1.1811405443, 1.1823559604, 1.1829828531, 1.1833584585, 1.1836084881, 1.1837883624, 1.1839256589] },
    };

    [Theory]
    [MemberData(nameof(Published))]
    public void Estimates_after_every_column_are_the_published_ones(string name, double[] smallest, double[] largest)
    {
        SmallMatrix r = Triangle(name);
        var estimate = new IncrementalCondition();
        for (int k = 0; k < smallest.Length; k++)
        {
            estimate.Add(r.Column(k)[..(k + 1)]);
            // The smallest pivots are themselves known to a rounding error of the column only, hence 1e-6.
            Assert.Equal(1, estimate.SmallestEstimate / smallest[k], 1e-6);
            Assert.Equal(1, estimate.LargestEstimate / largest[k], 1e-8);
        }
    }

    [Theory]
    [InlineData("Q3")]
    [InlineData("Q2")]
    [InlineData("Hilbert")]
    [InlineData("Kahan")]
    public void Estimates_keep_their_side_of_the_truth_and_stay_within_a_factor_of_three(string name)
    {
        SmallMatrix r = Triangle(name);
        var estimate = new IncrementalCondition();
        for (int k = 0; k < r.Columns; k++)
        {
            estimate.Add(r.Column(k)[..(k + 1)]);
            double[] truth = TruncatedSvd.Of(Leading(r, k + 1), 0).SingularValues;
            Assert.InRange(estimate.LargestEstimate, truth[0] / 3, truth[0] * (1 + 1e-12));
            Assert.InRange(estimate.SmallestEstimate, (truth[^1] * (1 - 1e-9)) - (1e-15 * truth[0]), 3 * truth[^1]);
        }
    }

    internal static SmallMatrix Leading(SmallMatrix r, int size)
    {
        var result = new SmallMatrix(size, size);
        for (int j = 0; j < size; j++) r.Column(j)[..size].CopyTo(result.Column(j));
        return result;
    }

    private static SmallMatrix Triangle(string name) => name switch
    {
        "Hilbert" => Columns.Basis(ReferenceMatrixTests.Hilbert(6)).Coefficients(),
        "Kahan" => Columns.Basis(ReferenceMatrixTests.Kahan(10)).Coefficients(),
        _ => QrCaseTests.NewestFirstTriangle(QrCase.Load(name)),
    };
}
