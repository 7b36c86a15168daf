using Bunit;
using CouplingWatch.Components.Parts;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Parts;

public sealed class StateMarkTests : PageTest
{
    public static TheoryData<StateMark> Marks => [.. Enum.GetValues<StateMark>()];

    [Fact]
    public void Every_state_has_a_sign_of_its_own_shape()
    {
        var shapes = Enum.GetValues<StateMark>().Select(m => Render<Sign>(p => p.Add(s => s.Mark, m)).Find("path").GetAttribute("d")).ToList();
        Assert.Equal(shapes.Count, shapes.Distinct().Count());
    }

    [Theory]
    [MemberData(nameof(Marks))]
    public void A_sign_is_decoration_beside_its_word(StateMark mark) =>
        Assert.Equal("true", Render<Sign>(p => p.Add(s => s.Mark, mark)).Find("svg").GetAttribute("aria-hidden"));

    [Theory]
    [MemberData(nameof(Marks))]
    public void A_seam_is_drawn_upright_and_lying(StateMark mark)
    {
        var seam = Render<Seam>(p => p.Add(s => s.Mark, mark));
        Assert.Equal(2, seam.FindAll("svg.v .seam-left, svg.v .seam-right").Count);
        Assert.Equal(2, seam.FindAll("svg.h .seam-left, svg.h .seam-right").Count);
        Assert.Equal("true", seam.Find(".seamcell").GetAttribute("aria-hidden"));
    }

    [Fact]
    public void Only_states_that_part_the_two_sides_are_filled()
    {
        StateMark[] filled = [StateMark.Dearer, StateMark.LosingTime, StateMark.Diverging, StateMark.GaveUp];
        foreach (var mark in Enum.GetValues<StateMark>())
            Assert.Equal(filled.Contains(mark), Render<Seam>(p => p.Add(s => s.Mark, mark)).FindAll(".seam-fill").Count > 0);
    }

    [Theory]
    [InlineData("on-course", StateMark.OnCourse)]
    [InlineData("learning", StateMark.Learning)]
    [InlineData("dearer", StateMark.Dearer)]
    [InlineData("losing-time", StateMark.LosingTime)]
    [InlineData("diverging", StateMark.Diverging)]
    [InlineData("diverged", StateMark.Diverging)]
    [InlineData("gave-up", StateMark.GaveUp)]
    [InlineData("aborted", StateMark.GaveUp)]
    [InlineData("silent", StateMark.Silent)]
    [InlineData("not-judged", StateMark.NotJudged)]
    [InlineData("finished", StateMark.Finished)]
    [InlineData("stopped", StateMark.Finished)]
    [InlineData("a-code-of-tomorrow", StateMark.NotJudged)]
    public void A_verdict_takes_its_mark_from_its_code(string code, StateMark mark) => Assert.Equal(mark, StateMarks.Of(new Verdict(code, "Word", "")));

    [Fact]
    public void A_healthy_state_claims_no_colour()
    {
        foreach (var mark in (StateMark[])[StateMark.OnCourse, StateMark.Learning, StateMark.NotJudged]) Assert.Equal("is-plain", StateMarks.Class(mark));
    }

    [Fact]
    public void An_alert_that_returned_is_met_whatever_its_check()
    {
        var alert = HandAlerts.Divergence(HandLock.Now);
        Assert.Equal(StateMark.Diverging, StateMarks.Of(alert));
        Assert.Equal(StateMark.Finished, StateMarks.Of(alert with { State = AlertState.Returned }));
        Assert.Equal(StateMark.Dearer, StateMarks.Of(HandAlerts.Unequal(HandLock.Now)));
        Assert.Equal(StateMark.LosingTime, StateMarks.Of(HandAlerts.Starved(HandLock.Now)));
        Assert.Equal(StateMark.Silent, StateMarks.Of(HandAlerts.Silence(HandLock.Now)));
    }

    [Theory]
    [InlineData("the residual has grown.", "Diverging: the residual has grown.")]
    [InlineData(": the residual has grown.", "Diverging: the residual has grown.")]
    [InlineData(" in its first step.", "Diverging in its first step.")]
    [InlineData("", "Diverging")]
    public void The_sentence_goes_on_after_the_word(string text, string all)
    {
        var sentence = Render<VerdictSentence>(p => p.Add(v => v.Verdict, new Verdict("diverging", "Diverging", text)).Add(v => v.Href, "runs/x"));
        Assert.Equal(all, sentence.Find("a").TextContent);
        Assert.Equal("svg", sentence.Find("a").FirstElementChild!.LocalName);
    }

    [Fact]
    public void On_the_run_page_the_sentence_is_the_heading() =>
        Assert.Single(Render<VerdictSentence>(p => p.Add(v => v.Verdict, new Verdict("on-course", "On course", "")).Add(v => v.Heading, true).Add(v => v.Big, true)).FindAll("h1.say.big"));
}
