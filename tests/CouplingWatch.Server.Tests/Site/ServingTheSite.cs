using Microsoft.AspNetCore.Mvc.Testing;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Site;

public class ServingTheSite(SharedWatch shared) : IClassFixture<SharedWatch>
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    public static TheoryData<string, string> Assets => new()
    {
        { "/_framework/blazor.web.js", "text/javascript" },
        { "/css/tokens.css", "text/css" },
        { "/css/parts.css", "text/css" },
        { "/js/start.js", "text/javascript" },
        { "/icons/mark.svg", "image/svg+xml" },
        { "/lib/apexcharts/apexcharts.esm.js", "text/javascript" },
        { "/lib/apexcharts/apexcharts.css", "text/css" },
    };

    [Theory]
    [MemberData(nameof(Assets))]
    public async Task The_files_of_the_site_are_served(string address, string type)
    {
        await using var watch = shared.Room();
        using var answer = await watch.Http.GetAsync(address, Cancel);
        Assert.Equal(200, (int)answer.StatusCode);
        Assert.Equal(type, answer.Content.Headers.ContentType?.MediaType);
    }

    [Fact]
    public async Task The_chart_library_is_the_one_pinned()
    {
        await using var watch = shared.Room();
        Assert.Contains("ApexCharts v4.7.0", (await watch.Http.GetStringAsync("/lib/apexcharts/apexcharts.esm.js", Cancel))[..200], StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_factory_of_the_test_framework_hosts_the_whole_site()
    {
        var data = Directory.CreateTempSubdirectory("couplingwatch-").FullName;
        await using (var factory = new WebApplicationFactory<Program>().WithWebHostBuilder(b => b.UseSetting("CouplingWatch:Data", data)))
        {
            using var http = factory.CreateClient();
            using var page = await http.GetAsync("/", Cancel);
            Assert.Equal("text/html", page.Content.Headers.ContentType?.MediaType);
            Assert.Equal(200, (int)(await http.GetAsync("/_framework/blazor.web.js", Cancel)).StatusCode);
            Assert.Equal(200, (int)(await http.GetAsync("/readyz", Cancel)).StatusCode);
        }
        Directory.Delete(data, recursive: true);
    }

    [Fact]
    public async Task A_page_allows_no_script_of_its_own_and_nothing_from_elsewhere()
    {
        await using var watch = shared.Room();
        using var answer = await watch.Http.GetAsync("/", Cancel);
        var policy = Directives(answer.Headers.GetValues("Content-Security-Policy").Single());
        Assert.Equal("'none'", policy["default-src"]);
        Assert.Equal("'self'", policy["script-src"]);
        Assert.Equal("'self'", policy["connect-src"]);
        Assert.Equal("'none'", policy["frame-ancestors"]);
        Assert.DoesNotContain(policy.Values, v => v.Contains("unsafe", StringComparison.Ordinal) || v.Contains("http", StringComparison.Ordinal) || v.Contains('*', StringComparison.Ordinal));
        Assert.Equal("nosniff", answer.Headers.GetValues("X-Content-Type-Options").Single());
        Assert.Equal("no-referrer", answer.Headers.GetValues("Referrer-Policy").Single());
    }

    [Fact]
    public async Task The_page_carries_the_nonce_of_its_own_policy_and_never_the_same_twice()
    {
        await using var watch = shared.Room();
        var first = await NonceAsync(watch);
        var second = await NonceAsync(watch);
        Assert.NotEqual(first, second);
    }

    [Fact]
    public async Task The_page_holds_no_inline_script_and_no_address_of_another_site()
    {
        await using var watch = shared.Room();
        var page = await watch.Http.GetStringAsync("/", Cancel);
        Assert.DoesNotMatch("<script(?![^>]*\\ssrc=)[^>]*>", page);
        Assert.DoesNotMatch("(src|href)=\"(https?:)?//", page);
        Assert.DoesNotMatch("\\son[a-z]+=\"", page);
        Assert.DoesNotMatch("\\sstyle=\"", page);
    }

    private static async Task<string> NonceAsync(WatchUnderTest watch)
    {
        using var answer = await watch.Http.GetAsync("/", Cancel);
        var page = await answer.Content.ReadAsStringAsync(Cancel);
        var nonce = System.Text.RegularExpressions.Regex.Match(page, "name=\"csp-nonce\" content=\"([^\"]+)\"").Groups[1].Value;
        Assert.NotEmpty(nonce);
        Assert.Contains($"'nonce-{nonce}'", answer.Headers.GetValues("Content-Security-Policy").Single(), StringComparison.Ordinal);
        return nonce;
    }

    private static Dictionary<string, string> Directives(string policy) => policy.Split(';', StringSplitOptions.TrimEntries | StringSplitOptions.RemoveEmptyEntries)
        .Select(d => d.Split(' ', 2)).ToDictionary(d => d[0], d => d[1]);
}
