using CouplingWatch.Numerics.Sequences;

namespace CouplingWatch.Numerics.Tests.Published;

/// <summary>
/// Sources: Econometrica 13 (1945) 245–259; Statistical Methods in Water Resources, ch. 8 and 10 (data from memory); all results
/// recomputed with SciPy 1.10.
/// </summary>
public class TrendTests
{
    private static readonly double[] Falling =
        [0.0, -0.150834, -0.525554, -0.842581, -0.950589, -1.170151, -1.569987, -1.811814, -1.914084, -2.210326, -2.59614, -2.7649, -2.900021, -3.260864, -3.59718, -3.714094];

    private static readonly double[] Stalled = [-3.0, -3.1, -3.05, -3.1, -3.08, -3.1, -3.02, -3.07, -3.1, -3.05, -3.09, -3.06];

    private static readonly double[] TurningUp = [0, -0.4, -0.7, -0.9, -1, -0.95, -0.8, -0.55, -0.2, 0.3];

    [Fact]
    public void Ten_water_samples_show_the_published_trend_test()
    {
        double[] y = [1.22, 2.20, 4.80, 1.28, 1.97, 1.46, 2.64, 2.34, 4.84, 2.96];
        MannKendall test = MannKendall.Of(y);
        Assert.Equal(21, test.S);
        Assert.Equal(125, test.Variance, 1e-12);
        Assert.Equal(1.788854382, test.Z, 1e-9);
        Assert.Equal(0.07363827012, test.P, 1e-10);
        Assert.Equal(0.466666666667, test.TauB, 1e-12);
    }

    [Fact]
    public void One_wild_value_does_not_move_the_published_slope()
    {
        double[] x = [1, 2, 3, 4, 5, 6, 7], y = [1, 2, 3, 4, 5, 16, 7];
        TheilSen fit = TheilSen.Of(x, y);
        Assert.Equal(1, fit.Slope);
        Assert.Equal(0, fit.Intercept);
        MannKendall test = MannKendall.Of(y);
        Assert.Equal(19, test.S);
        Assert.Equal(44.3333333333, test.Variance, 1e-9);
        Assert.Equal(2.70338134134, test.Z, 1e-10);
        Assert.Equal(0.00686379498545, test.P, 1e-12);
        Assert.Equal(0.904761904762, test.TauB, 1e-11);
    }

    [Fact]
    public void A_falling_series_gives_the_reference_slope()
    {
        TheilSen fit = TheilSen.Of(Falling);
        Assert.Equal(-0.25103170979021, fit.Slope, 1e-13);
        Assert.Equal(0.0197888234265733, fit.Intercept, 1e-13);
        Assert.Equal(fit.Slope, TheilSen.SlopeOf(Falling));
        Assert.Equal(-120, MannKendall.Of(Falling).S);
        Assert.Equal(-5.3576795098, MannKendall.Of(Falling).Z, 1e-9);
    }

    [Fact]
    public void A_stalled_series_with_ties_shows_no_trend()
    {
        TheilSen fit = TheilSen.Of(Stalled);
        Assert.Equal(0, fit.Slope);
        Assert.Equal(-3.075, fit.Intercept, 1e-12);
        MannKendall test = MannKendall.Of(Stalled);
        Assert.Equal((-1L, 203.0, 0.0, 1.0), (test.S, test.Variance, test.Z, test.P));
        Assert.Equal(-0.0160251471616052, test.TauB, 1e-12);
    }

    [Fact]
    public void A_series_that_turns_up_hides_from_the_global_test()
    {
        Assert.Equal(0.0333333333, TheilSen.Of(TurningUp).Slope, 1e-9);
        Assert.Equal(0.3577708764, MannKendall.Of(TurningUp).Z, 1e-9);
        // A window over the last five values sees it.
        Assert.True(TheilSen.Of(TurningUp.AsSpan(5)).Slope > 0.25);
    }
}
