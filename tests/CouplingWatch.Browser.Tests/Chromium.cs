using Microsoft.Playwright;

namespace CouplingWatch.Browser.Tests;

/// <summary>A real Chromium for a test class. Where none is installed the tests skip and say so, unless <c>COUPLINGWATCH_BROWSER=required</c>.</summary>
public sealed class Chromium : IAsyncLifetime
{
    private static readonly string[] Places = ["/usr/bin/chromium", "/usr/bin/chromium-browser", "/usr/bin/google-chrome"];

    private IPlaywright? playwright;
    private IBrowser? browser;

    public async ValueTask InitializeAsync()
    {
        var path = Environment.GetEnvironmentVariable("COUPLINGWATCH_CHROMIUM") ?? Places.FirstOrDefault(File.Exists);
        if (path is null) return;
        playwright = await Playwright.CreateAsync();
        browser = await playwright.Chromium.LaunchAsync(new BrowserTypeLaunchOptions
        {
            ExecutablePath = path,
            Headless = true,
            Args = ["--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking", "--disable-component-update", "--disable-sync"],
        });
    }

    /// <summary>A fresh page in a context of its own; skips the calling test when there is no browser.</summary>
    public async Task<IPage> PageAsync(int width = 1440, int height = 1000, ColorScheme scheme = ColorScheme.Light)
    {
        if (browser is null)
        {
            const string missing = "No Chromium was found at /usr/bin/chromium; install it or set COUPLINGWATCH_CHROMIUM to its path.";
            if (Environment.GetEnvironmentVariable("COUPLINGWATCH_BROWSER") == "required") Assert.Fail(missing);
            Assert.Skip(missing);
        }
        var context = await browser.NewContextAsync(new BrowserNewContextOptions
        {
            ViewportSize = new ViewportSize { Width = width, Height = height },
            ColorScheme = scheme,
            Locale = "en-GB",
            ReducedMotion = ReducedMotion.Reduce,
        });
        return await context.NewPageAsync();
    }

    public async ValueTask DisposeAsync()
    {
        if (browser is not null) await browser.DisposeAsync();
        playwright?.Dispose();
    }
}
