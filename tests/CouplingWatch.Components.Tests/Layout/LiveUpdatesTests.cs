using CouplingWatch.Components.Layout;
using CouplingWatch.Components.Tests.Hand;
using Microsoft.Extensions.Time.Testing;

namespace CouplingWatch.Components.Tests.Layout;

public sealed class LiveUpdatesTests
{
    private readonly HandFeed feed = new();
    private readonly FakeTimeProvider clock = new(HandLock.Now);
    private int refreshed;

    private LiveUpdates Live(out IDisposable following, string? run = null)
    {
        var live = new LiveUpdates(feed, clock);
        following = live.Follow(run, () => { refreshed++; return Task.CompletedTask; });
        return live;
    }

    [Fact]
    public void A_hundred_records_in_a_second_refresh_four_times()
    {
        _ = Live(out var following);
        for (var i = 0; i < 100; i++)
        {
            feed.Tell("leaf80-3");
            clock.Advance(TimeSpan.FromMilliseconds(10));
        }
        Assert.InRange(refreshed, 4, 5);
        following.Dispose();
    }

    [Fact]
    public void The_last_change_is_never_lost()
    {
        _ = Live(out _);
        feed.Tell("a");
        clock.Advance(TimeSpan.FromMilliseconds(1));
        Assert.Equal(1, refreshed);
        feed.Tell("a");
        Assert.Equal(1, refreshed);
        clock.Advance(LiveUpdates.Interval);
        Assert.Equal(2, refreshed);
        clock.Advance(TimeSpan.FromSeconds(10));
        Assert.Equal(2, refreshed);
    }

    [Fact]
    public void Nothing_is_refreshed_while_paused_and_once_when_resumed()
    {
        var live = Live(out _);
        live.Pause();
        Assert.Equal(HandLock.Now, live.PausedAt);
        for (var i = 0; i < 9; i++) feed.Tell("a");
        clock.Advance(TimeSpan.FromSeconds(5));
        Assert.Equal(0, refreshed);
        live.Resume();
        clock.Advance(LiveUpdates.Interval);
        Assert.Equal(1, refreshed);
    }

    [Fact]
    public void A_hidden_tab_rests_and_catches_up_when_seen()
    {
        var live = Live(out _);
        live.SetHidden(true);
        feed.Tell("a");
        clock.Advance(TimeSpan.FromSeconds(5));
        Assert.Equal(0, refreshed);
        live.SetHidden(false);
        clock.Advance(TimeSpan.FromMilliseconds(1));
        Assert.Equal(1, refreshed);
    }

    [Fact]
    public void Being_seen_while_paused_stays_paused()
    {
        var live = Live(out _);
        live.Pause();
        live.SetHidden(true);
        feed.Tell("a");
        live.SetHidden(false);
        clock.Advance(TimeSpan.FromSeconds(1));
        Assert.True(live.Held);
        Assert.Equal(0, refreshed);
    }

    [Fact]
    public void A_slow_page_is_never_refreshed_twice_at_once()
    {
        var live = new LiveUpdates(feed, clock);
        var slow = new TaskCompletionSource();
        using var following = live.Follow(null, () => { refreshed++; return slow.Task; });
        feed.Tell("a");
        clock.Advance(TimeSpan.FromMilliseconds(1));
        feed.Tell("a");
        clock.Advance(TimeSpan.FromSeconds(2));
        Assert.Equal(1, refreshed);
        slow.SetResult();
        clock.Advance(LiveUpdates.Interval);
        Assert.True(SpinWait.SpinUntil(() => { clock.Advance(LiveUpdates.Interval); return refreshed == 2; }, TimeSpan.FromSeconds(10)));
    }

    [Fact]
    public void A_page_that_was_left_hears_no_more()
    {
        _ = Live(out var following);
        following.Dispose();
        feed.Tell("a");
        clock.Advance(TimeSpan.FromSeconds(1));
        Assert.Equal(0, refreshed);
        Assert.Equal(0, feed.Listeners);
    }

    [Fact]
    public void A_page_of_one_run_hears_of_that_run_alone()
    {
        _ = Live(out _, "leaf80-3");
        feed.Tell("leaf80-5");
        clock.Advance(TimeSpan.FromSeconds(1));
        Assert.Equal(0, refreshed);
        feed.Tell("leaf80-3");
        clock.Advance(TimeSpan.FromMilliseconds(1));
        Assert.Equal(1, refreshed);
    }
}
