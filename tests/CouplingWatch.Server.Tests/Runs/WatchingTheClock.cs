using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Server.Runs;
using static CouplingWatch.Server.Tests.RunLines;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Runs;

public class WatchingTheClock
{
    [Fact]
    public async Task A_run_without_records_for_longer_than_its_limit_is_silent_until_the_next()
    {
        await using var watch = await StartAsync();
        var lines = Steps(4);
        foreach (var line in lines)
        {
            await watch.AcceptAsync("leaf-1", line);
            watch.Time.Advance(TimeSpan.FromSeconds(2));
        }
        Assert.DoesNotContain("silent", await ChecksAsync(watch));
        watch.Time.Advance(TimeSpan.FromSeconds(61) + ClockWatch.Interval);
        await watch.UntilAsync(async () => (await ChecksAsync(watch)).Contains("silent"));
        Assert.Equal("quiet", await StateAsync(watch));
        await watch.AcceptAsync("leaf-1", Remark(lines.Count));
        Assert.Equal("live", await StateAsync(watch));
        Assert.Equal(2, await EventsAsync(watch));
    }

    [Fact]
    public async Task Silence_is_journaled_once_however_long_it_lasts()
    {
        await using var watch = await StartAsync();
        foreach (var line in Steps(4))
        {
            await watch.AcceptAsync("leaf-1", line);
            watch.Time.Advance(TimeSpan.FromSeconds(2));
        }
        for (var i = 0; i < 20; i++) watch.Time.Advance(TimeSpan.FromSeconds(30));
        await watch.UntilAsync(async () => (await ChecksAsync(watch)).Contains("silent"));
        watch.Time.Advance(TimeSpan.FromSeconds(30));
        await watch.GetAsync("/api/runs/leaf-1");
        Assert.Equal(1, await EventsAsync(watch));
    }

    [Fact]
    public async Task A_closed_run_is_never_silent()
    {
        await using var watch = await StartAsync();
        var lines = Steps(4);
        foreach (var line in lines.Append(Close(lines.Count)))
        {
            await watch.AcceptAsync("leaf-1", line);
            watch.Time.Advance(TimeSpan.FromSeconds(2));
        }
        watch.Time.Advance(TimeSpan.FromHours(1));
        Assert.True(watch.TryHost("leaf-1", out var host));
        host.LookAtClock();
        await host.EnsureLoadedAsync(TestContext.Current.CancellationToken);
        Assert.Equal(0, await EventsAsync(watch));
    }

    [Fact]
    public async Task A_run_that_beats_inside_a_long_pass_is_not_silent_but_may_hang()
    {
        await using var watch = await StartAsync();
        var lines = Steps(3);
        await watch.AcceptAsync("leaf-1", Joined(lines).Replace("\"nodes\":2", "\"nodes\":2,\"beatSeconds\":60", StringComparison.Ordinal));
        for (var inside = 60; inside <= 720; inside += 60)
        {
            watch.Time.Advance(TimeSpan.FromSeconds(60));
            await watch.AcceptAsync("leaf-1", $$"""{"kind":"beat","in":"water","insideSeconds":{{inside}}}""");
        }
        Assert.Equal(["hang"], await ChecksAsync(watch));
    }

    private static async Task<IReadOnlyList<string>> ChecksAsync(WatchUnderTest watch) =>
        [.. (await watch.GetAsync("/api/alerts?run=leaf-1&state=open"))["items"]!.AsArray().Select(a => a!["check"]!.GetValue<string>())];

    private static async Task<string> StateAsync(WatchUnderTest watch) => (await watch.GetAsync("/api/runs/leaf-1"))["summary"]!["state"]!.GetValue<string>();

    private static async Task<int> EventsAsync(WatchUnderTest watch)
    {
        var count = 0;
        await foreach (var entry in watch.Journal.ReadAsync("leaf-1"))
            if (entry.Kind == JournalEntryKind.Event) count++;
        return count;
    }
}
