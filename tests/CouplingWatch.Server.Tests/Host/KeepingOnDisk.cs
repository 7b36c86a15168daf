using Microsoft.AspNetCore.Builder;
using Microsoft.AspNetCore.TestHost;
using Microsoft.Extensions.Logging;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Host;

public sealed class KeepingOnDisk : IDisposable
{
    private readonly string data = Directory.CreateTempSubdirectory("couplingwatch-").FullName;

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Fact]
    public async Task What_was_answered_is_there_after_the_next_start()
    {
        string before;
        await using (var first = await StartedAsync())
        {
            using var http = first.GetTestClient();
            using var answer = await http.PostAsync("/api/runs/leaf-1/records", RecordsBody(RunLines.Joined(RunLines.Steps(8))), Cancel);
            Assert.Equal(200, (int)answer.StatusCode);
            using var put = await http.SendAsync(Api.Publishing.Put("leaf-1", 0, new { settings = new { relaxation = 0.2 }, reason = "r" }), Cancel);
            Assert.Equal(200, (int)put.StatusCode);
            before = await LookAsync(http);
        }
        await using var second = await StartedAsync();
        using var again = second.GetTestClient();
        Assert.Equal(before, await LookAsync(again));
        using var resent = await again.PostAsync("/api/runs/leaf-1/records", RecordsBody(RunLines.Joined(RunLines.Steps(8))), Cancel);
        Assert.Equal("""{"next":41,"revision":1}""", await resent.Content.ReadAsStringAsync(Cancel));
    }

    [Fact]
    public async Task A_second_server_on_the_same_folder_ends_with_one_line()
    {
        await using var first = await StartedAsync();
        using var error = new StringWriter();
        var code = await WatchServer.RunAsync(["--data", data, "--urls", "http://127.0.0.1:0"], null, b => b.Logging.ClearProviders(), error);
        Assert.NotEqual(0, code);
        Assert.StartsWith("--data " + data, error.ToString(), StringComparison.Ordinal);
        Assert.Single(error.ToString().Split('\n', StringSplitOptions.RemoveEmptyEntries));
    }

    private async Task<WebApplication> StartedAsync()
    {
        var app = WatchServer.Create(["--data", data], build: b =>
        {
            b.WebHost.UseTestServer();
            b.Logging.ClearProviders();
        });
        await app.StartAsync(Cancel);
        return app;
    }

    private static async Task<string> LookAsync(HttpClient http) =>
        await http.GetStringAsync("/api/runs/leaf-1/steps", Cancel) + await http.GetStringAsync("/api/runs/leaf-1/iterations?step=7", Cancel)
        + await http.GetStringAsync("/api/runs/leaf-1/settings/history", Cancel) + await http.GetStringAsync("/api/alerts", Cancel);

    public void Dispose() => Directory.Delete(data, recursive: true);
}
