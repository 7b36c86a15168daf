using System.Text.Json.Nodes;
using CouplingWatch.Components.Alerts;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Alerts;

public sealed class AlertGroupsTests
{
    private static readonly DateTimeOffset Now = HandLock.Now;

    private static Alert One(string id, string? cause = null, AlertState state = AlertState.Unacknowledged) =>
        HandAlerts.Of("leaf80-3", "slow", Severity.Warning, 1, 1, 1, Now, "x", []) with { Id = id, Cause = cause, State = state };

    [Fact]
    public void A_chain_of_causes_is_one_group_under_its_root()
    {
        var group = Assert.Single(AlertGroups.Of([One("c", "b"), One("b", "a"), One("a")]));
        Assert.Equal("a", group.Head.Id);
        Assert.Equal(2, group.AlsoSeen.Count);
    }

    [Fact]
    public void A_cause_that_is_not_listed_hides_nothing() => Assert.Single(AlertGroups.Of([One("c", "gone")]));

    [Fact]
    public void A_cause_that_has_ended_does_not_hide_what_still_stands() =>
        Assert.Equal(2, AlertGroups.Of([One("c", "a"), One("a", state: AlertState.Returned)]).Count);

    [Fact]
    public void Two_that_name_each_other_are_not_lost() =>
        Assert.Equal(["a", "b"], AlertGroups.Of([One("a", "b"), One("b", "a")]).SelectMany(g => g.AlsoSeen.Select(a => a.Id).Append(g.Head.Id)).Order());

    [Fact]
    public void Repeated_and_standing_alerts_show_in_the_load()
    {
        Alert[] alerts = [One("1"), One("2"), One("3"), One("4") with { Check = "drift", RaisedAt = Now.AddDays(-2) }];
        Assert.Contains("3 alerts in the last 60 min, 3.0 an hour. Repeated: slow of leaf80-3 (3 times). Standing longer than a day: 1.", AlertLoad.Of(alerts, Now), StringComparison.Ordinal);
    }

    [Fact]
    public void Evidence_is_spelt_out_with_its_units()
    {
        var rows = EvidenceWords.Of(new JsonObject { ["secondsSilent"] = 2820, ["threshold"] = 1e-2, ["fallingShare"] = 0.9, ["medianGapSeconds"] = 156, ["rule"] = "own-norm", ["alternating"] = true, ["kept"] = 5, ["growth"] = 2381.4, ["path"] = new JsonArray() });
        Assert.Equal([("silent for", "47 min"), ("threshold", "10⁻²"), ("share of iterations that fell", "90 %"), ("median gap", "2.6 min"), ("rule", "own-norm"), ("alternating", "yes"), ("columns kept", "5"), ("growth since the least", "2,380")], rows);
    }

    [Fact]
    public void A_number_of_the_evidence_is_found_whatever_it_was_made_of()
    {
        Assert.Equal(3, EvidenceWords.Number(new JsonObject { ["a"] = 3 }, "a"));
        Assert.Equal(0.5, EvidenceWords.Number((JsonObject)JsonNode.Parse("{\"a\":5e-1}")!, "a"));
        Assert.Null(EvidenceWords.Number(new JsonObject { ["a"] = "x" }, "a"));
        Assert.Null(EvidenceWords.Number([], "a"));
    }

    [Fact]
    public void What_is_lost_otherwise_is_the_runs_own_stake()
    {
        var alert = HandAlerts.Divergence(Now);
        Assert.Equal("144 node-h of the 144 it can still spend.", AlertPhrases.IfNothing(alert, HandLock.Diverging(Now)));
        Assert.Equal("Nothing more: the run has ended.", AlertPhrases.IfNothing(alert, HandLock.Finished(Now)));
        Assert.Equal("Not known: the run is not on the board.", AlertPhrases.IfNothing(alert, null));
        Assert.StartsWith("Nothing is lost", AlertPhrases.IfNothing(alert with { State = AlertState.Returned }, null), StringComparison.Ordinal);
        Assert.StartsWith("Node-hours not known: the run does not say", AlertPhrases.IfNothing(alert, HandLock.Diverging(Now) with { NodeHoursAtStake = null, Nodes = null }), StringComparison.Ordinal);
    }

    [Fact]
    public void The_plot_of_a_step_shows_its_target_and_where_the_alert_was_raised()
    {
        var path = EvidencePath.Of([.. Enumerable.Range(0, 10).Select(i => View(i, 4 - 0.6 * i))], One("a") with { Step = 3, Iteration = 4 })!;
        Assert.NotNull(path.TargetY);
        Assert.NotNull(path.Raised);
        Assert.Equal("10⁴", path.TopLabel);
        Assert.Equal("residual ÷ target", path.Axis);
        Assert.Null(EvidencePath.Of([View(0, 3)], One("a")));
        Assert.Null(EvidencePath.Of([], One("a")));
    }

    private static IterationView View(int iteration, double need) =>
        new(3, iteration, null, iteration, new Dictionary<string, double>(), Math.Pow(10, need - 4), need, null, null, null, need <= 0);
}
