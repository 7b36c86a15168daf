using Microsoft.Playwright;
using static Microsoft.Playwright.Assertions;

namespace CouplingWatch.Browser.Tests;

/// <summary>The main job in a real browser: a run streams, and the page says what is wrong without being reloaded.</summary>
public sealed class AlertsAppear(Chromium chromium) : IClassFixture<Chromium>
{
    [Fact]
    public async Task An_empty_board_says_how_to_send_the_first_record()
    {
        var page = await chromium.PageAsync();
        await using var server = await LiveServer.StartAsync();
        await page.GotoAsync(server.Address.ToString());
        await Expect(page.GetByRole(AriaRole.Heading, new() { Level = 1 })).ToBeVisibleAsync();
        await Expect(page.Locator("body")).ToContainTextAsync("/api/runs/");
    }

    [Fact]
    public async Task A_diverging_run_shows_on_the_open_board_and_on_its_page()
    {
        var page = await chromium.PageAsync();
        await using var server = await LiveServer.StartAsync();
        var lines = LiveServer.Recording("c06-relaxation-too-large.ndjson");
        await server.PostAsync("leaf95-1", lines.Take(4));
        await page.GotoAsync(server.Address.ToString());
        var lane = page.GetByRole(AriaRole.Article).Filter(new() { HasText = "leaf95-1" });
        await Expect(lane).ToBeVisibleAsync();
        await Expect(lane).Not.ToContainTextAsync("Diverging");

        await server.PostAsync("leaf95-1", lines.Skip(4).Take(8));
        await Expect(lane).ToContainTextAsync("Diverging");

        await page.GotoAsync(new Uri(server.Address, "/runs/leaf95-1").ToString());
        await Expect(page.GetByRole(AriaRole.Heading, new() { Level = 1 })).ToContainTextAsync("Diverging");
    }

    [Fact]
    public async Task The_pages_ask_nobody_but_their_own_server_and_report_no_script_error()
    {
        var page = await chromium.PageAsync();
        await using var server = await LiveServer.StartAsync();
        await server.PostAsync("leaf80-1", LiveServer.Recording("c01-steady-leaf.ndjson").Take(120));
        var foreign = new List<string>();
        var errors = new List<string>();
        page.Request += (_, request) =>
        {
            if (!request.Url.StartsWith(server.Address.ToString(), StringComparison.Ordinal) && !request.Url.StartsWith("data:", StringComparison.Ordinal)) foreign.Add(request.Url);
        };
        page.Console += (_, message) =>
        {
            if (message.Type == "error") errors.Add(message.Text);
        };
        page.PageError += (_, error) => errors.Add(error);
        foreach (var path in new[] { "/", "/runs/leaf80-1", "/alerts" })
        {
            await page.GotoAsync(new Uri(server.Address, path).ToString());
            await Expect(page.GetByRole(AriaRole.Heading, new() { Level = 1 })).ToBeVisibleAsync();
            await page.WaitForLoadStateAsync(LoadState.NetworkIdle);
        }
        Assert.Empty(foreign);
        Assert.Empty(errors);
    }
}
