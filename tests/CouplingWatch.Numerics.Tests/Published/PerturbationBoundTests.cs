using CouplingWatch.Numerics.Conditioning;
using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Tests.Secants;
using CouplingWatch.Numerics.Trials;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Tests.Published;

/// <summary>
/// Source: Björck, Numerical Methods for Least Squares Problems, SIAM 1996, theorem 1.4.6 (from memory):
/// ‖δx‖ ≤ κ/(1 − κε_A)·(ε_A‖x‖ + ε_b‖b‖/‖A‖ + ε_A κ‖r‖/‖A‖).
/// </summary>
public class PerturbationBoundTests
{
    [Theory]
    [InlineData(1e2, 0.0)]
    [InlineData(1e2, 1.0)]
    [InlineData(1e5, 0.0)]
    [InlineData(1e5, 1.0)]
    public void The_least_squares_perturbation_bound_is_never_violated(double condition, double residual)
    {
        const int rows = 30, count = 5;
        const double size = 1e-10;
        var random = new SplitMix64(2024);
        var (a, left) = WithCondition(ref random, rows, count, condition);
        double[] x = [.. Enumerable.Range(0, count).Select(_ => 0.0)];
        for (int j = 0; j < count; j++) x[j] = random.NextNormal();
        Normalise(x);
        double[] b = new double[rows];
        for (int j = 0; j < count; j++) LongVector.AddScaled(b, x[j], a[j]);
        LongVector.AddScaled(b, residual, left);

        double norm = TruncatedSvd.Of(SmallMatrix.FromColumns(a), 0).SingularValues[0];
        double kappa = ConditionNumber.Of(SmallMatrix.FromColumns(a)).Raw;
        double[] reference = Solve(a, b);
        double worst = 0;
        for (int trial = 0; trial < 200; trial++)
        {
            var (noisy, epsA) = Perturbed(ref random, a, size * norm, norm);
            double[] change = Columns.Normal(ref random, rows);
            double scale = size * LongVector.Norm(b) / LongVector.Norm(change);
            double[] noisyB = Columns.Combine((1, b), (scale, change));
            double error = LongVector.Norm(Columns.Combine((1, Solve(noisy, noisyB)), (-1, reference)));
            double bound = kappa / (1 - (kappa * epsA)) * ((epsA * LongVector.Norm(reference)) + (size * LongVector.Norm(b) / norm) + (epsA * kappa * residual / norm));
            // The bound is first order; allow it one part in a thousand and the rounding of the two solves.
            Assert.True(error <= (1.001 * bound) + (1e-15 * kappa), $"trial {trial}: error {error:E3}, bound {bound:E3}");
            worst = Math.Max(worst, error / bound);
        }
        Assert.True(worst > 0.01, $"the bound is far from every trial ({worst:E2}): the test shows nothing");
    }

    private static double[] Solve(IReadOnlyList<double[]> columns, double[] b)
    {
        SecantBasis basis = Columns.Basis(columns);
        FilterOutcome filter = ColumnFilter.Apply(basis, [.. Enumerable.Range(0, columns.Count)], SecantFilter.None, 0);
        var projection = new double[basis.Rank];
        basis.Project([.. b.Select(v => -v)], projection, out double outside);
        return SecantFit.Solve(filter, projection, outside).Alpha;
    }

    /// <summary>A = U·diag(geometric, 1 … 1/κ)·Wᵀ, and a unit vector outside its range.</summary>
    private static (List<double[]> Columns, double[] Outside) WithCondition(ref SplitMix64 random, int rows, int count, double condition)
    {
        SecantBasis u = Columns.Basis(Columns.Normal(random.Next(), rows, count + 1));
        SecantBasis w = Columns.Basis(Columns.Normal(random.Next(), count, count));
        var columns = new List<double[]>();
        for (int j = 0; j < count; j++)
        {
            var column = new double[rows];
            for (int k = 0; k < count; k++)
                LongVector.AddScaled(column, Math.Pow(condition, -k / (count - 1.0)) * w.Direction(k)[j], u.Direction(k));
            columns.Add(column);
        }
        return (columns, u.Direction(count).ToArray());
    }

    private static (List<double[]> Columns, double RelativeSize) Perturbed(ref SplitMix64 random, List<double[]> a, double size, double norm)
    {
        List<double[]> noise = Columns.Normal(random.Next(), a[0].Length, a.Count);
        double factor = size / TruncatedSvd.Of(SmallMatrix.FromColumns(noise), 0).SingularValues[0];
        return ([.. a.Select((column, j) => Columns.Combine((1, column), (factor, noise[j])))], size / norm);
    }

    private static void Normalise(double[] x)
    {
        double norm = LongVector.Norm(x);
        for (int i = 0; i < x.Length; i++) x[i] /= norm;
    }
}
