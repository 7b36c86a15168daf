using CouplingWatch.Components.Board;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Board;

public sealed class SinceLookedTests
{
    private static readonly DateTimeOffset Now = HandLock.Now;

    private static IReadOnlyList<Happening> Since(double hours, params RunSummary[] runs) =>
        SinceLooked.Of(runs, [.. runs.SelectMany(r => r.OpenAlerts)], Now.AddHours(-hours), Now);

    [Fact]
    public void The_newest_comes_first()
    {
        var all = Since(20, [.. HandLock.Lanes(Now)]);
        Assert.Equal(all.OrderByDescending(h => h.At), all);
        Assert.Equal("leaf95-1", all[0].Run);
        Assert.Equal("began to diverge at 14:14", all[0].Phrase);
    }

    [Fact]
    public void Nothing_is_told_of_what_stood_before() => Assert.Empty(Since(0.05, [.. HandLock.Lanes(Now)]));

    [Fact]
    public void A_run_that_closed_is_told() => Assert.Equal("finished at 03:14", Since(20, HandLock.Finished(Now)).Single().Phrase);

    [Fact]
    public void A_new_setting_is_told_with_its_step() =>
        Assert.Contains("took over revision 1 at step 12", Since(20, HandLock.Restarted(Now)).Single().Phrase, StringComparison.Ordinal);

    [Fact]
    public void What_a_cause_explains_is_not_told_twice() =>
        Assert.DoesNotContain("slowed down", Since(20, HandLock.Losing(Now)).Single().Phrase, StringComparison.Ordinal);

    [Fact]
    public void A_check_of_tomorrow_is_told_by_its_name()
    {
        var run = HandLock.Learning(Now) with { OpenAlerts = [HandAlerts.Of("leaf80-9", "tides", Severity.Note, 1, 1, 3, Now.AddMinutes(-5), "x", [])] };
        Assert.Equal("raised tides at 14:27", Since(1, run).Single().Phrase);
    }

    [Fact]
    public void The_strip_is_marked_at_the_first_step_after_the_last_look()
    {
        var run = HandLock.Losing(Now);
        var looked = run.Strip[3].At!.Value.AddSeconds(1);
        Assert.Equal(4, SinceLooked.FirstStep(run, looked));
        Assert.Null(SinceLooked.FirstStep(run, Now));
        Assert.Null(SinceLooked.FirstStep(run, null));
    }
}
