using Bunit;
using CouplingWatch.Components.Campaign;
using CouplingWatch.Components.Layout;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using CsCheck;

namespace CouplingWatch.Components.Tests.Campaign;

public sealed class CampaignTests : PageTest
{
    private static readonly DateTimeOffset Now = HandLock.Now;
    private static readonly CouplingSettings Own = new() { Method = CouplingMethod.IqnIls, Relaxation = 0.1, HistorySteps = 4, FilterRule = FilterRule.OwnNorm, FilterThreshold = 1e-4, IterationCap = 40 };

    private static RunDetail Detail(string run, CouplingSettings settings, int[] counts, string campaign = "north-lock", CouplingScheme scheme = CouplingScheme.Serial) => new()
    {
        Summary = HandLock.Learning(Now) with { Run = run, Campaign = campaign, Scheme = scheme, Strip = HandStrip.Of(Now, counts) },
        RestsOn = "",
        Settings = settings,
        Time = 0.2,
        Cost = new CostView { NodeHoursSpent = 12 },
    };

    private static CampaignRun Run(string run, CouplingSettings settings, params int[] counts) => CampaignRun.Of(Detail(run, settings, counts));

    private static int[] Steady(int first, int count, int steps) => [first, .. Enumerable.Repeat(count, steps)];

    [Fact]
    public void Steps_from_rest_count_for_nothing()
    {
        var run = Run("a", Own, 12, 9, 8, 4, 4, 4, 6);
        Assert.Equal((4, 4.5), (run.Steps, run.Mean));
        Assert.Equal((4, 6), (run.Low, run.High));
        Assert.Equal(60, run.NodeHoursPerSecond);
    }

    [Fact]
    public void Only_steps_under_the_settings_in_force_count()
    {
        var detail = Detail("a", Own, [12, 20, 20, 20, 20, 20, 4, 4]);
        var strip = detail.Summary.Strip.Select(b => b.FromStep == 6 ? b with { Revision = 1 } : b).ToList();
        var run = CampaignRun.Of(detail with { Summary = detail.Summary with { Strip = strip } });
        Assert.Equal((2, 4.0, 6), (run.Steps, run.Mean, run.SinceStep));
    }

    [Fact]
    public void The_cheapest_run_that_met_every_step_is_the_best()
    {
        var view = CampaignView.Of([Run("slow", Own with { HistorySteps = 0 }, Steady(12, 9, 30)), Run("best", Own, Steady(12, 4, 30)), Run("gave-up", Own with { HistorySteps = 8 }, [.. Steady(12, 3, 30), 40])]);
        Assert.Equal("best", view.Best!.Name);
        Assert.Equal("iqn-ils, relaxation 0.10, history 4, own-norm 10⁻⁴: 4.0 iterations a step.", view.Sentence);
        Assert.Equal(["best", "gave-up", "slow"], view.Runs.Select(r => r.Name));
        Assert.StartsWith("Not sure yet: 28 steps of best. Against 1 other run that met every step.", view.HowSure, StringComparison.Ordinal);
    }

    [Fact]
    public void Two_runs_that_agree_make_it_surer()
    {
        var view = CampaignView.Of([Run("a", Own, Steady(12, 4, 30)), Run("b", Own with { IterationCap = 60 }, Steady(12, 5, 30))]);
        Assert.StartsWith("Fairly sure: 28 steps of a and 28 steps of b. Against 0 other runs", view.HowSure, StringComparison.Ordinal);
        Assert.StartsWith("Not sure yet: 28 steps of a. Nothing else to compare with.", CampaignView.Of([Run("a", Own, Steady(12, 4, 30))]).HowSure, StringComparison.Ordinal);
    }

    [Fact]
    public void Little_is_no_ground_for_a_sentence()
    {
        var view = CampaignView.Of([Run("young", Own, 12, 4, 4, 4)]);
        Assert.Null(view.Best);
        Assert.StartsWith("Nothing yet", view.Sentence, StringComparison.Ordinal);
    }

    [Fact]
    public void Serial_and_parallel_are_never_compared_by_iterations()
    {
        var view = CampaignView.Of([Run("a", Own, Steady(12, 6, 30)), Run("b", Own, Steady(12, 7, 30)), CampaignRun.Of(Detail("p", Own, Steady(12, 3, 30), scheme: CouplingScheme.Parallel))]);
        Assert.True(view.Mixed);
        Assert.Equal("a", view.Best!.Name);
    }

    [Fact]
    public void A_threshold_stands_on_its_axis_by_decades()
    {
        var axis = SettingAxis.All.Single(a => a.Key == "filterThreshold");
        var (dots, ticks) = axis.Draw([Run("a", Own with { FilterThreshold = 1e-6 }, Steady(9, 4, 9)), Run("b", Own, Steady(9, 5, 9)), Run("c", Own with { FilterThreshold = 1e-2 }, Steady(9, 9, 9)), Run("d", Own with { FilterThreshold = null }, Steady(9, 9, 9))]);
        Assert.Equal([0, 0.5, 1.0], dots.Select(d => Math.Round(d.X, 9)));
        Assert.Equal(["10⁻⁶", "10⁻⁴", "10⁻²"], ticks.Select(t => t.Text));
    }

    [Fact]
    public void Words_stand_side_by_side()
    {
        var (dots, ticks) = SettingAxis.All.Single(a => a.Key == "method").Draw([Run("a", Own, Steady(9, 4, 9)), Run("b", Own with { Method = CouplingMethod.Aitken }, Steady(9, 20, 9))]);
        Assert.Equal(["aitken", "iqn-ils"], ticks.Select(t => t.Text));
        Assert.Equal([true, false], dots.Select(d => d.QuasiNewton));
        Assert.Equal([0.75, 0.25], dots.Select(d => d.X));
    }

    [Fact]
    public void Names_beside_close_dots_never_overlap() =>
        Gen.Select(Gen.Double[0, 400], Gen.Double[0, 200]).Array[0, 12].Sample(dots =>
        {
            var places = LabelPlaces.Spread(dots.Select(d => (100.0, d.Item2)).ToList(), 60, 13);
            var sorted = places.Order().ToArray();
            for (var i = 1; i < sorted.Length; i++) Assert.True(sorted[i] - sorted[i - 1] >= 13 - 1e-6);
        });

    [Fact]
    public void The_page_compares_the_runs_of_one_campaign()
    {
        Add(Detail("leaf-a", Own, Steady(12, 4, 40)), Detail("leaf-b", Own with { HistorySteps = 0 }, Steady(12, 9, 40)), Detail("plate", Own, Steady(12, 6, 40), "cold-plate"));
        var page = Render<CampaignPage>(p => p.Add(c => c.Name, "north-lock"));
        Assert.Equal(["leaf-a", "leaf-b"], page.FindAll("tbody th[scope=row] a").Select(a => a.TextContent));
        Assert.Contains("\"historySteps\":4", page.Find("#best-settings").TextContent, StringComparison.Ordinal);
        Assert.Equal(["cold-plate", "north-lock"], page.FindAll("nav.campaigns a").Select(a => a.TextContent));
        page.Find("#against").Change("relaxation");
        Assert.Contains("against relaxation", page.Find("figcaption").TextContent, StringComparison.Ordinal);
        Assert.DoesNotContain("style=", page.Markup, StringComparison.Ordinal);
    }

    [Fact]
    public void A_campaign_that_is_not_there_says_so()
    {
        Add(Detail("leaf-a", Own, Steady(12, 4, 40)));
        Assert.Contains("There is no campaign “south-lock”.", Render<CampaignPage>(p => p.Add(c => c.Name, "south-lock")).Markup, StringComparison.Ordinal);
    }

    [Fact]
    public void Without_campaigns_the_page_says_how_a_run_names_one()
    {
        Feed.Runs.Clear();
        Assert.Contains("No run belongs to a campaign.", Render<CampaignPage>().Markup, StringComparison.Ordinal);
    }

    private void Add(params RunDetail[] details)
    {
        Feed.Runs.Clear();
        foreach (var detail in details)
        {
            Feed.Runs.Add(detail.Summary);
            Feed.Details[detail.Summary.Run] = detail;
        }
    }
}
