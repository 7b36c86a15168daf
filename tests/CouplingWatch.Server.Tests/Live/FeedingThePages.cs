using CouplingWatch.Components.Feed;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using Microsoft.Extensions.DependencyInjection;
using static CouplingWatch.Server.Tests.RunLines;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Live;

public class FeedingThePages
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Fact]
    public async Task A_page_is_called_for_its_run_and_the_board_for_every_run()
    {
        await using var watch = await StartAsync();
        var feed = watch.App.Services.GetRequiredService<IWatchFeed>();
        Assert.Null(feed.LastRecordAt);
        int one = 0, all = 0;
        using var page = feed.OnChange("leaf-1", () => Interlocked.Increment(ref one));
        var board = feed.OnChange(null, () => Interlocked.Increment(ref all));
        await watch.AcceptAsync("leaf-1", Open() + Remark(1));
        await watch.AcceptAsync("leaf-2", Open());
        Assert.True(one > 0);
        Assert.True(all > one);
        board.Dispose();
        var before = all;
        await watch.AcceptAsync("leaf-2", Remark(1));
        Assert.Equal(before, all);
        Assert.Equal(watch.Time.GetUtcNow(), feed.LastRecordAt);
    }

    [Fact]
    public async Task A_page_that_fails_disturbs_neither_the_run_nor_the_other_pages()
    {
        await using var watch = await StartAsync();
        var feed = watch.App.Services.GetRequiredService<IWatchFeed>();
        var called = false;
        using var bad = feed.OnChange("leaf-1", () => throw new InvalidOperationException("this page is gone"));
        using var good = feed.OnChange("leaf-1", () => called = true);
        Assert.Equal(2, await watch.AcceptAsync("leaf-1", Open() + Remark(1)));
        Assert.True(called);
    }

    [Fact]
    public async Task A_page_publishes_and_reads_why_it_may_not()
    {
        await using var watch = await StartAsync();
        await watch.AcceptAsync("leaf-1", Open());
        var feed = watch.App.Services.GetRequiredService<IWatchFeed>();
        var wrong = await feed.PublishAsync("leaf-1", new SettingsProposal { Settings = new CouplingSettings { Relaxation = 7 }, Reason = "r" }, 0, Cancel);
        Assert.Null(wrong.Revision);
        Assert.Contains("0.01 to 1", wrong.Problem, StringComparison.Ordinal);
        var right = await feed.PublishAsync("leaf-1", new SettingsProposal { Settings = new CouplingSettings { Relaxation = 0.7 }, Reason = "r" }, 0, Cancel);
        Assert.Equal((1, null), (right.Revision, right.Problem));
        Assert.NotNull((await feed.PublishAsync("nobody", new SettingsProposal { Settings = new() }, 0, Cancel)).Problem);
    }

    [Fact]
    public async Task What_is_not_there_is_null_or_empty()
    {
        await using var watch = await StartAsync();
        var feed = watch.App.Services.GetRequiredService<IWatchFeed>();
        Assert.Empty(await feed.BoardAsync(Cancel));
        Assert.Empty(await feed.AlertsAsync(Cancel));
        Assert.Null(await feed.RunAsync("nobody", Cancel));
        Assert.Null(await feed.BasisAsync("nobody", cancel: Cancel));
        Assert.Empty(await feed.IterationsAsync("nobody", 0, Cancel));
        Assert.False(await feed.AcknowledgeAsync("nobody~divergence~1", Cancel));
    }
}
