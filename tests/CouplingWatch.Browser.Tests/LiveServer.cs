using System.Net.Http.Headers;
using CouplingWatch.Server;
using Microsoft.AspNetCore.Builder;
using Microsoft.AspNetCore.Hosting.Server;
using Microsoft.AspNetCore.Hosting.Server.Features;
using Microsoft.Extensions.DependencyInjection;

namespace CouplingWatch.Browser.Tests;

/// <summary>The real server on a free port of the loopback address, with a data folder of its own that is removed afterwards.</summary>
public sealed class LiveServer : IAsyncDisposable
{
    private readonly WebApplication app;
    private readonly string folder;

    private LiveServer(WebApplication app, string folder, Uri address)
    {
        this.app = app;
        this.folder = folder;
        Address = address;
        Http = new HttpClient { BaseAddress = address };
    }

    public Uri Address { get; }

    public HttpClient Http { get; }

    public static async Task<LiveServer> StartAsync()
    {
        var folder = Directory.CreateTempSubdirectory("couplingwatch-").FullName;
        var app = WatchServer.Create(["--urls", "http://127.0.0.1:0", "--data", folder]);
        await app.StartAsync();
        var address = app.Services.GetRequiredService<IServer>().Features.Get<IServerAddressesFeature>()!.Addresses.First();
        return new LiveServer(app, folder, new Uri(address));
    }

    /// <summary>Posts lines of NDJSON to a run and returns the body of the answer.</summary>
    public async Task<string> PostAsync(string run, IEnumerable<string> lines)
    {
        using var body = new StringContent(string.Join('\n', lines) + "\n");
        body.Headers.ContentType = new MediaTypeHeaderValue("application/x-ndjson");
        using var answer = await Http.PostAsync($"/api/runs/{run}/records", body, TestContext.Current.CancellationToken);
        var text = await answer.Content.ReadAsStringAsync(TestContext.Current.CancellationToken);
        Assert.True(answer.IsSuccessStatusCode, text);
        return text;
    }

    /// <summary>The lines of a labelled recording.</summary>
    public static string[] Recording(string name) => File.ReadAllLines(Path.Combine(ReferenceFolder, "recordings", name));

    public async ValueTask DisposeAsync()
    {
        Http.Dispose();
        await app.StopAsync();
        await app.DisposeAsync();
        Directory.Delete(folder, recursive: true);
    }

    private static string ReferenceFolder
    {
        get
        {
            for (var at = new DirectoryInfo(AppContext.BaseDirectory); at is not null; at = at.Parent)
            {
                var candidate = Path.Combine(at.FullName, "tests", "reference");
                if (Directory.Exists(candidate)) return candidate;
            }
            throw new DirectoryNotFoundException($"No tests/reference above {AppContext.BaseDirectory}.");
        }
    }
}
