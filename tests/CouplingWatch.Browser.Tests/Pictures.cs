using Microsoft.Playwright;
using static Microsoft.Playwright.Assertions;

namespace CouplingWatch.Browser.Tests;

/// <summary>
/// Makes the pictures of the guides and of reviews: every screen, light and dark, wide and narrow, into the folder that
/// <c>COUPLINGWATCH_PICTURES</c> names. With <c>COUPLINGWATCH_ADDRESS</c> it looks at a server that runs already (the demo), else it
/// starts one and feeds it recordings. Skipped otherwise.
/// </summary>
public sealed class Pictures(Chromium chromium) : IClassFixture<Chromium>
{
    private static readonly string? Folder = Environment.GetEnvironmentVariable("COUPLINGWATCH_PICTURES");

    [Fact]
    public async Task Every_screen_is_pictured_in_light_and_dark_wide_and_narrow()
    {
        Assert.SkipWhen(Folder is null, "COUPLINGWATCH_PICTURES names no folder.");
        Directory.CreateDirectory(Folder!);
        await using var server = Environment.GetEnvironmentVariable("COUPLINGWATCH_ADDRESS") is null ? await LiveServer.StartAsync() : null;
        var address = server?.Address ?? new Uri(Environment.GetEnvironmentVariable("COUPLINGWATCH_ADDRESS")!);
        if (server is not null) await FeedAsync(server);
        using var http = new HttpClient { BaseAddress = address };
        var paths = (Environment.GetEnvironmentVariable("COUPLINGWATCH_PATHS") ?? "/,/alerts,/runs/leaf80-3,/runs/leaf80-1").Split(',');
        foreach (var (scheme, width) in new[] { (ColorScheme.Light, 1440), (ColorScheme.Dark, 1440), (ColorScheme.Light, 390), (ColorScheme.Dark, 390) })
        {
            var page = await chromium.PageAsync(width, 1000, scheme);
            foreach (var path in paths)
            {
                await page.GotoAsync(new Uri(address, path).ToString());
                await Expect(page.GetByRole(AriaRole.Heading, new() { Level = 1 })).ToBeVisibleAsync();
                await Expect(page.GetByRole(AriaRole.Status).Filter(new() { HasText = "Connected" })).ToBeVisibleAsync(new() { Timeout = 20_000 });
                if (path.StartsWith("/runs/", StringComparison.Ordinal) && !path.EndsWith("/bench", StringComparison.Ordinal)) await Expect(page.Locator(".apexcharts-svg").First).ToBeVisibleAsync(new() { Timeout = 20_000 });
                var name = path == "/" ? "board" : path.Trim('/').Replace('/', '-');
                await page.ScreenshotAsync(new() { Path = Path.Combine(Folder!, $"{name}-{width}-{scheme.ToString().ToLowerInvariant()}.png"), FullPage = true });
            }
            await page.Context.CloseAsync();
        }
    }

    private static async Task FeedAsync(LiveServer server)
    {
        foreach (var (run, recording, records) in new[]
        {
            ("leaf80-1", "c01-steady-leaf.ndjson", 150), ("leaf80-3", "c11-starved-basis.ndjson", 220),
            ("leaf95-1", "c06-relaxation-too-large.ndjson", 14), ("gate-wall-2", "c24-unequal-fields.ndjson", 170), ("plate-3", "c02-steady-plate.ndjson", 100),
        })
            await server.PostAsync(run, LiveServer.Recording(recording).Take(records));
    }
}
