using Bunit;
using CouplingWatch.Components.Examine;

namespace CouplingWatch.Components.Tests.Examine;

public sealed class DropFileTests : PageTest
{
    private const string Answer = """
        {"verdict":{"code":"losing-time","word":"Losing time","text":"The basis is starved.","severity":"warning"},"steps":16,"iterations":211,"alertCount":23,
        "alerts":[{"check":"starved","severity":"warning","step":0,"iteration":8,"text":"The newest column was left out."}],
        "advice":["lower the threshold 10⁻² → 10⁻⁷"],"notJudged":[{"check":"hang","why":"no beats are sent","send":"beat records"}]}
        """;

    [Fact]
    public void A_recording_is_judged_and_its_verdict_said_first()
    {
        var drop = Render<DropFile>();
        drop.InvokeAsync(() => drop.Instance.Reading("c11.ndjson"));
        Assert.Equal("Judging c11.ndjson.", drop.Find("[role=status]").TextContent);
        Assert.Single(drop.FindAll("button"));
        drop.InvokeAsync(() => drop.Instance.Judged(Answer));
        Assert.Equal("Losing time: the basis is starved.", drop.Find("h2").TextContent);
        Assert.Contains("23 alerts", drop.Find(".facts").TextContent, StringComparison.Ordinal);
        Assert.Contains("warning, step 0: the newest column was left out.", drop.Find(".examined-alerts").TextContent, StringComparison.Ordinal);
        Assert.Contains("And 22 more.", drop.Markup, StringComparison.Ordinal);
        Assert.Equal("Next time: lower the threshold 10⁻² → 10⁻⁷.", drop.Find(".next").TextContent);
        Assert.Contains("hang: no beats are sent. Send beat records.", drop.Markup, StringComparison.Ordinal);
        Assert.Empty(drop.FindAll("button"));
    }

    [Fact]
    public void What_cannot_be_read_is_named()
    {
        var drop = Render<DropFile>();
        drop.InvokeAsync(() => drop.Instance.Reading("hull.log"));
        drop.InvokeAsync(() => drop.Instance.Judged("{\"problem\":\"Line 1: a recording begins with “open”.\"}"));
        Assert.Equal("hull.log was not judged. Line 1: a recording begins with “open”.", drop.Find("[role=alert]").TextContent);
    }

    [Theory]
    [InlineData("")]
    [InlineData("<html>")]
    [InlineData("{}")]
    [InlineData("[1]")]
    public void An_answer_that_is_none_is_a_problem_and_no_exception(string answer) => Assert.Equal("The server’s answer could not be read.", ExaminedFile.Read(answer).Problem);

    [Fact]
    public void Cancelling_leaves_the_panel_as_it_was()
    {
        var drop = Render<DropFile>();
        drop.InvokeAsync(() => drop.Instance.Reading("long.ndjson"));
        drop.InvokeAsync(() => drop.Instance.Judged(""));
        Assert.Empty(drop.FindAll(".examined, .problem, button"));
    }

    [Fact]
    public void The_file_can_be_chosen_by_keyboard()
    {
        var drop = Render<DropFile>();
        Assert.Equal("drop-file", drop.Find("label").GetAttribute("for"));
        Assert.Equal("file", drop.Find("#drop-file").GetAttribute("type"));
    }
}
