using CouplingWatch.Components.Parts;
using CouplingWatch.Components.RunPage;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.RunPage;

public class AnswerTests
{
    private static readonly DateTimeOffset Now = HandLock.Now;

    [Fact]
    public void A_step_foretold_from_earlier_ones_is_answered_yes_with_its_band()
    {
        var answer = ConvergenceAnswer.Of(HandDetails.TwoFields(Now));
        Assert.Equal((StateMark.OnCourse, "Yes: done at iteration 9 (8\u2060–\u206010), as earlier steps were."), (answer.Mark, answer.Say));
        Assert.Contains("The residual falls by a factor of 5.8 an iteration (10–90 %: 1.20 to 104).", answer.Notes);
        Assert.Contains(answer.Facts, f => f is { Name: "governs now", Value: "deflection" });
    }

    [Fact]
    public void A_step_whose_cap_comes_first_is_answered_hardly()
    {
        var answer = ConvergenceAnswer.Of(HandDetails.Starved(Now));
        Assert.Equal((StateMark.LosingTime, "Hardly: each iteration keeps 0.90 of the residual; the cap of 40 comes first."), (answer.Mark, answer.Say));
    }

    [Fact]
    public void A_step_that_diverges_is_answered_no_with_its_growth()
    {
        var answer = ConvergenceAnswer.Of(HandDetails.Diverging(Now));
        Assert.Equal((StateMark.Diverging, "No: the residual grows 2.0-fold an iteration."), (answer.Mark, answer.Say));
    }

    [Fact]
    public void A_forecast_by_the_rate_alone_is_likely_and_still_learning()
    {
        var run = HandDetails.TwoFields(Now) with { StepForecast = new(4, 3, 5, "rate", 5, 3.6) };
        Assert.Equal((StateMark.Learning, "Likely: done at iteration 9, by its rate alone."), (ConvergenceAnswer.Of(run).Mark, ConvergenceAnswer.Of(run).Say));
    }

    [Fact]
    public void Two_residuals_are_too_early_to_say()
    {
        var run = HandDetails.TwoFields(Now);
        run = run with { StepForecast = null, Paths = [.. run.Paths.Select(p => p with { Points = [.. p.Points.Take(2)] })] };
        Assert.StartsWith("Too early to say", ConvergenceAnswer.Of(run).Say, StringComparison.Ordinal);
    }

    [Fact]
    public void A_done_step_a_quiet_run_a_run_without_target_and_an_empty_one_have_their_words()
    {
        var run = HandDetails.TwoFields(Now);
        var done = run with { Summary = run.Summary with { Passes = [new PassPair(5, -0.2, -9, true)] } };
        Assert.Equal((StateMark.Finished, "Yes: done at iteration 5."), (ConvergenceAnswer.Of(done).Mark, ConvergenceAnswer.Of(done).Say));
        var quiet = run with { Summary = run.Summary with { State = "quiet" } };
        Assert.Equal(StateMark.Silent, ConvergenceAnswer.Of(quiet).Mark);
        Assert.StartsWith("Not judged: no target is known", ConvergenceAnswer.Of(HandDetails.NotJudged(Now)).Say, StringComparison.Ordinal);
        Assert.Equal("No iteration yet.", ConvergenceAnswer.Of(HandDetails.JustOpened(Now)).Say);
    }

    [Fact]
    public void An_alert_of_an_earlier_step_does_not_speak_for_the_step_in_progress()
    {
        var run = HandDetails.TwoFields(Now);
        var stall = HandAlerts.Of("gate-wall-2", "stall", Severity.Warning, 2, 9, 40, Now, "step 2 stalled", []);
        Assert.DoesNotContain("Step 2 stalled.", ConvergenceAnswer.Of(run with { Summary = run.Summary with { OpenAlerts = [stall] } }).Notes);
        Assert.Contains("Step 2 stalled.", ConvergenceAnswer.Of(run with { Summary = run.Summary with { OpenAlerts = [stall with { LastStep = 17 }] } }).Notes);
    }

    [Fact]
    public void What_nothing_can_be_sent_for_asks_for_nothing()
    {
        Assert.Equal("", Answer.ToSend(new NotJudged("error-estimate", "it is known for fixed relaxation only", "nothing: this method has no such estimate")));
        Assert.Equal("beats", Answer.ToSend(new NotJudged("hang", "no beats are sent", "beats")));
    }

    [Fact]
    public void A_starved_basis_is_answered_no_with_what_is_left()
    {
        var answer = BasisAnswer.Of(HandDetails.Starved(Now));
        Assert.Equal((StateMark.LosingTime, "No, starved: 5 of 45 columns are kept, one of this step."), (answer.Mark, answer.Say));
        Assert.Contains(answer.Facts, f => f is { Name: "least advised, from noise 10⁻⁸", Value: "10⁻⁷" });
    }

    [Fact]
    public void A_sound_basis_says_whose_columns_are_left_out()
    {
        var answer = BasisAnswer.Of(HandDetails.TwoFields(Now));
        Assert.Equal(StateMark.OnCourse, answer.Mark);
        Assert.EndsWith("left out belong to earlier steps.", answer.Say, StringComparison.Ordinal);
    }

    [Fact]
    public void A_basis_that_cannot_be_judged_says_why_and_what_to_send()
    {
        var answer = BasisAnswer.Of(HandDetails.NotJudged(Now));
        Assert.Equal((StateMark.NotJudged, "Not judged: two fields of different units came without weights."), (answer.Mark, answer.Say));
        Assert.Equal(["For it, send fields[].weight."], answer.Notes);
        Assert.StartsWith("There is none", BasisAnswer.Of(HandDetails.Diverging(Now)).Say, StringComparison.Ordinal);
    }

    [Fact]
    public void Who_carries_the_residual_first_and_last_is_named()
    {
        Assert.Equal("History at first, this step's own columns from iteration 4 on.", SplitAnswer.Of(HandDetails.TwoFields(Now)).Say);
        Assert.Contains("The linear model foretold the next residual well in 3 of 5 passes.", SplitAnswer.Of(HandDetails.TwoFields(Now)).Notes);
        Assert.Equal("This step's own columns from the first pass to the last.", SplitAnswer.Of(HandDetails.Starved(Now)).Say);
    }

    [Fact]
    public void Directions_that_the_relaxation_does_not_tame_matter_by_the_method_in_use()
    {
        var dearer = SpectrumAnswer.Of(HandDetails.TwoFields(Now));
        Assert.Equal((StateMark.Dearer, "It throws the residual back 27-fold: 30 of 40 directions seen are not tamed by relaxation 0.1."), (dearer.Mark, dearer.Say));
        Assert.Equal(StateMark.Diverging, SpectrumAnswer.Of(HandDetails.Diverging(Now)).Mark);
        Assert.Equal("Nothing unusual: all 14 directions seen are tamed by relaxation 0.1.", SpectrumAnswer.Of(HandDetails.Starved(Now)).Say);
        Assert.StartsWith("Not judged", SpectrumAnswer.Of(HandDetails.NotJudged(Now)).Say, StringComparison.Ordinal);
    }

    [Fact]
    public void The_cost_says_what_is_spent_what_is_to_go_and_whether_it_fits()
    {
        var answer = CostAnswer.Of(HandDetails.Starved(Now), Now);
        Assert.Equal((StateMark.LosingTime, "38 node-h so far, 65 to go; it ends Wed 23:32, after this allocation."), (answer.Mark, answer.Say));
        Assert.Equal(StateMark.OnCourse, CostAnswer.Of(HandDetails.TwoFields(Now), Now).Mark);
        Assert.Equal("Not judged: no seconds are sent.", CostAnswer.Of(HandDetails.NotJudged(Now), Now).Say);
    }

    [Theory]
    [InlineData(RevisionState.Published, StateMark.Dearer, "has not read it yet")]
    [InlineData(RevisionState.PickedUp, StateMark.Dearer, "from the next step")]
    [InlineData(RevisionState.Applied, StateMark.Learning, "applied from step 17; its effect is being learnt")]
    [InlineData(RevisionState.Refused, StateMark.GaveUp, "refused: outside its range")]
    [InlineData(RevisionState.Withdrawn, StateMark.OnCourse, "withdrawn")]
    public void What_became_of_the_newest_revision_is_a_sentence(RevisionState state, StateMark mark, string words)
    {
        var run = HandDetails.Starved(Now).With(new SettingsRevision { Revision = 1, Settings = HandDetails.Settings(FilterRule.PivotRatio, 1e-7), State = state, FromStep = 17, Refused = "outside its range" });
        Assert.Equal(mark, SettingsAnswer.Of(run).Mark);
        Assert.Contains(words, SettingsAnswer.Of(run).Say, StringComparison.Ordinal);
    }

    [Fact]
    public void Settings_in_one_line_leave_out_what_was_not_declared()
    {
        Assert.Equal("iqn-ils, history 4 steps, pivot-ratio 10⁻², relaxation 0.1, predictor linear, cap 40", SettingsWords.Of(HandDetails.Settings(FilterRule.PivotRatio, 1e-2)));
        Assert.Equal("settings not declared", SettingsWords.Of(new CouplingSettings()));
    }
}
