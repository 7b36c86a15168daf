using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Host;

public class KeepingToOneself(SharedWatch shared) : IClassFixture<SharedWatch>
{
    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Theory]
    [InlineData("https://elsewhere.example")]
    [InlineData("http://localhost:9999")]
    [InlineData("null")]
    public async Task What_a_page_of_another_site_sends_is_refused(string origin)
    {
        await using var watch = shared.Room();
        using var request = new HttpRequestMessage(HttpMethod.Post, "/api/runs/leaf-1/records") { Content = RecordsBody(RunLines.Open()) };
        request.Headers.Add("Origin", origin);
        await FaultAsync(await watch.Http.SendAsync(request, Cancel), 403, "cross-origin");
    }

    [Fact]
    public async Task What_its_own_pages_send_is_taken()
    {
        await using var watch = shared.Room();
        using var request = new HttpRequestMessage(HttpMethod.Post, "/api/runs/leaf-1/records") { Content = RecordsBody(RunLines.Open()) };
        request.Headers.Add("Origin", "http://localhost");
        Assert.Equal(200, (int)(await watch.Http.SendAsync(request, Cancel)).StatusCode);
    }

    [Fact]
    public async Task A_name_that_only_leads_here_by_someone_else_s_word_is_refused()
    {
        await using var watch = shared.Room();
        using var request = new HttpRequestMessage(HttpMethod.Get, "/api/runs");
        request.Headers.Host = "rebound.example";
        await FaultAsync(await watch.Http.SendAsync(request, Cancel), 403, "cross-origin");
    }
}
