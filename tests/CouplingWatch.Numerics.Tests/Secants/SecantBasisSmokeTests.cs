using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Trials;

namespace CouplingWatch.Numerics.Tests.Secants;

public class SecantBasisSmokeTests
{
    [Fact]
    public void Columns_come_back_as_directions_times_coefficients()
    {
        var random = new SplitMix64(3);
        var basis = new SecantBasis(37, 2);
        var columns = new List<double[]>();
        for (int j = 0; j < 9; j++)
        {
            var column = new double[37];
            for (int i = 0; i < column.Length; i++) column[i] = random.NextNormal();
            columns.Add(column);
            Assert.True(basis.Append(column).Independent);
        }
        basis.RemoveOldest(3);
        basis.RemoveAt(2);
        columns.RemoveRange(0, 3);
        columns.RemoveAt(2);
        for (int j = 0; j < columns.Count; j++)
        {
            for (int i = 0; i < 37; i++)
            {
                double sum = 0;
                ReadOnlySpan<double> c = basis.ColumnCoefficients(j);
                for (int k = 0; k < c.Length; k++) sum += basis.Direction(k)[i] * c[k];
                Assert.Equal(columns[j][i], sum, 1e-13);
            }
        }
    }
}
