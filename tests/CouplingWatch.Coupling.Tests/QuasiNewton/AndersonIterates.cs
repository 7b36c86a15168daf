namespace CouplingWatch.Coupling.Tests.QuasiNewton;

/// <summary>IQN-ILS without history and with first relaxation 1 is Anderson acceleration with β = 1 (SIAM J. Numer. Anal. 49 (2011) 1715-1735).</summary>
public class AndersonIterates
{
    private static SteppedCoupling IqnIls(double relaxation) =>
        new(FixedPoint.N, new MethodSettings { Relaxation = relaxation, FilterRule = Numerics.Secants.SecantFilter.None, FilterThreshold = 0 });

    [Theory]
    [InlineData(1)]
    [InlineData(2)]
    public void Iterates_agree_with_kinsol_to_its_printed_digits(int problem)
    {
        Func<double[], double[]> map = problem == 1 ? FixedPoint.P1() : FixedPoint.P2;
        var rows = ReferenceIterates.Block("kinsol_aa.txt", $"## P{problem} KINSOL FP+AA  maa beta orth = 6 1.0 0");
        var passes = FixedPoint.Step(IqnIls(1), 0, map, new double[FixedPoint.N], 1e-13);
        Assert.True(rows.Count <= passes.Count, $"{rows.Count} reference rows, {passes.Count} passes");
        for (var k = 0; k < rows.Count; k++)
        {
            var tolerance = rows[k][1] < 1e-8 ? 1e-11 : 1e-12;
            for (var i = 0; i < FixedPoint.N; i++) Assert.Equal(rows[k][2 + i], passes[k].X[i], tolerance);
            if (rows[k][1] > 1e-11) Assert.Equal(1, passes[k].Norm / rows[k][1], rows[k][1] > 1e-9 ? 1e-6 : 1e-3);
        }
    }

    [Fact]
    public void A_first_relaxation_of_one_half_gives_the_reference_iterates()
    {
        var rows = ReferenceIterates.Block("iqn_reference.txt", "## P1 IQN-ILS q=0, omega0=0.5");
        var passes = FixedPoint.Step(IqnIls(0.5), 0, FixedPoint.P1(), new double[FixedPoint.N], 1e-13);
        Assert.Equal(rows.Count, passes.Count);
        for (var k = 0; k < rows.Count; k++)
            for (var i = 0; i < FixedPoint.N; i++) Assert.Equal(rows[k][3 + i], passes[k].X[i], 1e-11);
    }

    [Fact]
    public void On_a_linear_map_the_next_iterate_is_the_map_of_the_gmres_iterate()
    {
        // Theorem 2.2 of the paper above: x_{k+1} = G(x_k of GMRES).
        var rows = ReferenceIterates.Block("gmres_equiv.txt", "k, ||GMRES residual||");
        var passes = FixedPoint.Step(IqnIls(1), 0, FixedPoint.Linear, new double[FixedPoint.N], 1e-13);
        foreach (var row in rows)
        {
            var expected = FixedPoint.Linear(row[2..8]);
            var got = passes[(int)row[0] + 1].X;
            for (var i = 0; i < FixedPoint.N; i++) Assert.Equal(expected[i], got[i], 1e-11);
        }
        Assert.True(passes[FixedPoint.N + 1].Norm < 1e-12, "GMRES is exact after N iterations, so the next iterate is the fixed point");
    }

    [Fact]
    public void The_report_names_the_columns_and_its_triangle_gives_back_the_norm_of_the_newest_column()
    {
        var passes = FixedPoint.Step(IqnIls(1), 7, FixedPoint.P1(), new double[FixedPoint.N], 1e-13);
        Assert.Equal(1.0, passes[0].Report!.Relaxation);
        Assert.Empty(passes[0].Report!.Columns);
        var third = passes[3].Report!;
        Assert.Null(third.Relaxation);
        Assert.Equal([new ColumnName(7, 2), new ColumnName(7, 1), new ColumnName(7, 0)], third.Columns);
        Assert.Equal(6, third.PackedR.Count);
        Assert.Equal(3, third.Coefficients.Count);
        var r3 = Residual(passes[3].X);
        var r2 = Residual(passes[2].X);
        Assert.Equal(FixedPoint.Norm([.. r3.Zip(r2, (a, b) => a - b)]), Math.Abs(third.PackedR[0]), 1e-12);
    }

    private static double[] Residual(double[] x) => [.. FixedPoint.P1()(x).Zip(x, (a, b) => a - b)];
}
