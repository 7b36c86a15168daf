using CouplingWatch.Components.SettingsForm;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.SettingsForm;

public class SettingsDraftTests
{
    private static readonly SettingKind Threshold = SettingKind.Named("filterThreshold")!, Cap = SettingKind.Named("iterationCap")!, Rule = SettingKind.Named("filterRule")!, History = SettingKind.Named("historySteps")!;

    private static SettingsDraft Draft() => new(HandDetails.Settings(FilterRule.PivotRatio, 1e-2), HandDetails.Declared, 3);

    [Fact]
    public void A_fresh_draft_changes_nothing_and_cannot_be_published()
    {
        var draft = Draft();
        Assert.Empty(draft.Changes);
        Assert.Equal("Nothing is changed yet.", draft.Hindrance);
        Assert.Equal("0.01", draft.Text(Threshold));
    }

    [Fact]
    public void Old_and_new_stand_side_by_side_and_a_reason_is_asked_for()
    {
        var draft = Draft();
        draft.Type(Threshold, "10⁻⁷");
        Assert.Equal([new SettingChange("filterThreshold", "10⁻²", "10⁻⁷", "cost")], draft.Changes);
        Assert.Contains("reason", draft.Hindrance, StringComparison.Ordinal);
        draft.Reason = "ten times the noise";
        Assert.Null(draft.Hindrance);
        var proposal = draft.Proposal();
        Assert.Equal(new CouplingSettings { FilterThreshold = 1e-7 }, proposal.Settings);
        Assert.Null(proposal.Confirm);
        Assert.Null(proposal.FallbackTo);
    }

    [Fact]
    public void Typing_the_old_value_again_takes_the_change_back()
    {
        var draft = Draft();
        draft.Type(Threshold, "1e-7");
        draft.Type(Threshold, "0.01");
        Assert.Empty(draft.Changes);
        draft.Type(Threshold, "1e-2");
        Assert.Empty(draft.Changes);
    }

    [Theory]
    [InlineData("0.5", "outside what the run declared, 10⁻¹² to 0.1")]
    [InlineData("lots", "not understood")]
    public void A_value_outside_what_was_declared_is_named(string text, string why)
    {
        var draft = Draft();
        draft.Type(Threshold, text);
        Assert.Equal(why, draft.Wrong(Threshold));
        draft.Reason = "because";
        Assert.Equal($"The threshold is {why}.", draft.Hindrance);
    }

    [Fact]
    public void Whole_numbers_and_choices_are_held_to()
    {
        var draft = Draft();
        draft.Type(History, "2.5");
        Assert.Equal("a whole number", draft.Wrong(History));
        draft.Type(Rule, "none");
        Assert.Equal("not among what the run declared", draft.Wrong(Rule));
    }

    [Fact]
    public void What_alters_the_result_asks_a_second_time_and_forgets_the_yes_when_taken_back()
    {
        var draft = Draft();
        draft.Reason = "harder steps ahead";
        draft.Type(Cap, "60");
        Assert.True(draft.AltersResult);
        Assert.Contains("a second time", draft.Hindrance, StringComparison.Ordinal);
        draft.Confirmed = true;
        Assert.Null(draft.Hindrance);
        Assert.True(draft.Proposal().Confirm);
        draft.Type(Cap, "40");
        Assert.False(draft.Confirmed);
    }

    [Fact]
    public void A_fall_back_goes_to_the_revision_it_was_made_from_and_commands_go_along()
    {
        var draft = Draft();
        draft.Reason = "stale";
        draft.FallBack = true;
        draft.Command("dropHistory", true);
        Assert.Null(draft.Hindrance);
        Assert.Equal(3, draft.Proposal().FallbackTo);
        Assert.Equal(["dropHistory"], draft.Proposal().Commands);
    }

    [Fact]
    public void Undo_proposes_every_value_that_differs_and_confirms_what_alters_the_result()
    {
        var before = new SettingsRevision { Revision = 0, Settings = HandDetails.Settings(FilterRule.PivotRatio, 1e-2) };
        var last = new SettingsRevision { Revision = 1, Settings = HandDetails.Settings(FilterRule.OwnNorm, 1e-4) with { IterationCap = 60 } };
        var undo = SettingsDraft.Undo(last, before);
        Assert.Equal(new CouplingSettings { FilterRule = FilterRule.PivotRatio, FilterThreshold = 1e-2, IterationCap = 40 }, undo.Settings);
        Assert.True(undo.Confirm);
        Assert.Equal("undo of revision 1: back to revision 0", undo.Reason);
    }

    [Theory]
    [InlineData("filterThreshold", null, 1e-7, "Publish threshold 10⁻⁷")]
    [InlineData("filterRule", "own-norm", 1e-4, "Publish filter rule own-norm, threshold 10⁻⁴")]
    [InlineData("historySteps", null, 8.0, "Publish history, steps 8")]
    public void An_advice_fills_the_draft_and_names_its_button(string setting, string? to, double? value, string button)
    {
        var advice = new Advice { Id = "a", Setting = setting, To = to, Value = value, Adjustable = true, Text = "do it" };
        Assert.True(AdvisedChange.CanPublish(advice, HandDetails.Declared));
        Assert.Equal(button, AdvisedChange.Button(advice));
        var draft = Draft();
        AdvisedChange.Into(draft, advice);
        Assert.NotEmpty(draft.Changes);
        Assert.Equal("as advised: do it", draft.Reason);
    }

    [Fact]
    public void An_advice_that_was_not_declared_adjustable_has_no_button()
    {
        Assert.False(AdvisedChange.CanPublish(new Advice { Id = "a", Setting = "weight", Value = 1e6, Text = "x", Adjustable = false }, HandDetails.Declared));
        Assert.False(AdvisedChange.CanPublish(new Advice { Id = "a", Setting = "method", To = "iqn-ils", Text = "x", Adjustable = true }, HandDetails.Declared));
        Assert.False(AdvisedChange.CanPublish(new Advice { Id = "a", Setting = "filterThreshold", Move = "down", Text = "x", Adjustable = true }, HandDetails.Declared));
    }

    [Theory]
    [InlineData(0.1, "0.1")]
    [InlineData(2.5e-5, "2.5 × 10⁻⁵")]
    [InlineData(1.234567e-7, "1.234567 × 10⁻⁷")]
    [InlineData(1e-7, "10⁻⁷")]
    [InlineData(0, "0")]
    public void A_value_is_written_to_its_last_digit(double value, string text) => Assert.Equal(text, SettingKind.Exact(value));
}
