using CoupledRuns;
using CouplingWatch.Records;
using CouplingWatch.Samples.Tests.Gate;
using CouplingWatch.Wire;
using LockGate.Cases;

namespace CouplingWatch.Samples.Tests.Runs;

public class TakingSettingsOver
{
    private static async Task<IReadOnlyList<StreamRecord>> WithRevision(SettingsRevision revision, int steps = 4)
    {
        var link = new RecordingLink();
        link.PublishAfterStep[1] = revision;
        var (_, recorded) = await Case.RunAsync(GateCases.Of("steady"), steps, link);
        return recorded.Records;
    }

    [Fact]
    public async Task A_revision_is_in_force_from_the_next_step_and_said_so_completely()
    {
        var records = await WithRevision(new SettingsRevision { Revision = 3, Settings = new CouplingSettings { HistorySteps = 0, Relaxation = 0.15 } });
        var applied = Assert.Single(records.OfType<AppliedRecord>());
        Assert.Equal((3, 2), (applied.Revision, applied.FromStep));
        Assert.Equal(GateCases.Sound with { HistorySteps = 0, Relaxation = 0.15 }, applied.Settings);
        var first = records.OfType<IterationRecord>().First(r => r.Step == 2);
        Assert.Equal(0.15, first.Relaxation);
        Assert.True(applied.Seq < first.Seq);
    }

    [Theory]
    [InlineData(0.005, null, "relaxation 0.005 lies outside 0.01 to 1")]
    [InlineData(null, 50, "iterationCap was not declared adjustable")]
    public async Task What_was_not_declared_or_lies_outside_is_refused_with_the_reason(double? relaxation, int? cap, string reason)
    {
        var records = await WithRevision(new SettingsRevision { Revision = 1, Settings = new CouplingSettings { Relaxation = relaxation, IterationCap = cap } });
        var applied = Assert.Single(records.OfType<AppliedRecord>());
        Assert.Equal(reason, applied.Refused);
        Assert.Null(applied.Settings);
    }

    [Fact]
    public void An_unknown_command_and_an_unknown_rule_are_refused()
    {
        Assert.Equal("the command 'refine' was not declared", SettingsTakeover.Refusal(GateCases.Sound, new CouplingSettings(), ["refine"], RunPlan.Everything));
        Assert.Equal("filterRule 'none' is none of own-norm, pivot-ratio",
            SettingsTakeover.Refusal(GateCases.Sound, new CouplingSettings { FilterRule = FilterRule.None }, [], RunPlan.Everything));
        Assert.Null(SettingsTakeover.Refusal(GateCases.Sound, GateCases.Sound with { FilterRule = FilterRule.PivotRatio }, ["dropHistory"], RunPlan.Everything));
    }

    [Fact]
    public async Task Dropping_the_history_makes_the_next_step_start_with_a_relaxation()
    {
        var records = await WithRevision(new SettingsRevision { Revision = 1, Settings = new CouplingSettings(), Commands = ["dropHistory"] });
        Assert.Null(records.OfType<IterationRecord>().First(r => r.Step == 1).Relaxation);
        Assert.Equal(0.1, records.OfType<IterationRecord>().First(r => r.Step == 2).Relaxation);
    }

    [Fact]
    public async Task A_stop_closes_the_run_as_stopped()
    {
        var records = await WithRevision(new SettingsRevision { Revision = 1, Settings = new CouplingSettings(), Commands = ["stop"] }, steps: 10);
        Assert.Equal(CloseOutcome.Stopped, Assert.IsType<CloseRecord>(records[^1]).Outcome);
        Assert.Equal(2, records.OfType<StepRecord>().Count());
    }
}
