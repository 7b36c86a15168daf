namespace CouplingWatch.Coupling.Tests;

/// <summary>The two problems of tests/reference/fixed-point-iterates, and small tools to iterate any map.</summary>
internal static class FixedPoint
{
    public const int N = 6;

    private static double A(int i, int j) => 1.2 * Math.Exp(-0.7 * Math.Abs(i - j));

    /// <summary>P1, its right-hand side shifted by <paramref name="shift"/>·sin(i + 1).</summary>
    public static Func<double[], double[]> P1(double shift = 0) => x =>
    {
        var y = Linear(x);
        for (var i = 0; i < N; i++) y[i] += 0.1 * Math.Sin(x[i]) + shift * Math.Sin(i + 1.0);
        return y;
    };

    public static double[] P2(double[] x)
    {
        var y = new double[N];
        for (var i = 0; i < N; i++) y[i] = 0.5 * Math.Cos(x[(i + 1) % N]) + 0.3 * Math.Sin(x[(i + N - 1) % N]) * x[i] + 0.1 * (i + 1);
        return y;
    }

    /// <summary>b − A x.</summary>
    public static double[] Linear(double[] x)
    {
        var y = new double[N];
        for (var i = 0; i < N; i++)
        {
            y[i] = 1.0 / (i + 1);
            for (var j = 0; j < N; j++) y[i] -= A(i, j) * x[j];
        }
        return y;
    }

    /// <summary>Iterates one step from <paramref name="x0"/> until ‖r‖ is below the tolerance; the last pass is observed only. Columns are lent.</summary>
    public static IReadOnlyList<Pass> Step(SteppedCoupling coupling, int step, Func<double[], double[]> map, double[] x0, double tolerance, int most = 60)
    {
        var passes = new List<Pass>();
        var x = (double[])x0.Clone();
        coupling.BeginStep(step);
        for (var k = 0; k < most; k++)
        {
            var output = map(x);
            var residual = new double[x.Length];
            for (var i = 0; i < x.Length; i++) residual[i] = output[i] - x[i];
            passes.Add(new Pass((double[])x.Clone(), Norm(residual), coupling));
            if (passes[^1].Norm < tolerance)
            {
                coupling.Observe(residual, output);
                break;
            }
            coupling.Update(residual, output, x);
            passes[^1] = passes[^1] with { Report = coupling.Report };
        }
        coupling.EndStep(lendColumns: true);
        return passes;
    }

    public static double Norm(ReadOnlySpan<double> v)
    {
        var sum = 0.0;
        foreach (var value in v) sum += value * value;
        return Math.Sqrt(sum);
    }

    internal sealed record Pass(double[] X, double Norm, SteppedCoupling Coupling, UpdateReport? Report = null);
}
