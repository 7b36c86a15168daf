using System.Net.Http.Headers;
using System.Text;
using System.Text.Json;
using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Builder;
using Microsoft.AspNetCore.TestHost;
using Microsoft.Extensions.DependencyInjection;
using Microsoft.Extensions.Logging;
using Microsoft.Extensions.Time.Testing;

namespace CouplingWatch.Server.Tests;

/// <summary>A whole server in this process, with a journal and a clock in the hands of the test.</summary>
internal sealed class WatchUnderTest : IAsyncDisposable
{
    private readonly string? data;
    private readonly string room;

    /// <param name="data">Null for a room in a server of someone else's.</param>
    private WatchUnderTest(WebApplication app, IJournal journal, FakeTimeProvider time, string? data, string room = "")
    {
        App = app;
        Journal = journal;
        Time = time;
        this.data = data;
        this.room = room;
        Http = new HttpClient(new RoomHandler(room, app.GetTestServer().CreateHandler())) { BaseAddress = new Uri("http://localhost/") };
    }

    /// <summary>The same server, with runs of one's own.</summary>
    public WatchUnderTest Room(string name) => new(App, Journal, Time, null, name);

    /// <summary>What the server said, with the runs called as the test calls them.</summary>
    public string Plain(string text) => room.Length == 0 ? text : text.Replace(room, "", StringComparison.Ordinal);

    /// <summary>What the server calls a run of this room.</summary>
    public string NameOf(string run) => room + run;

    public static DateTimeOffset Start { get; } = new(2026, 12, 1, 8, 0, 0, TimeSpan.Zero);

    public WebApplication App { get; }

    public IJournal Journal { get; }

    public FakeTimeProvider Time { get; }

    public HttpClient Http { get; }

    /// <param name="journal">One of an earlier server, to start again from.</param>
    public static async Task<WatchUnderTest> StartAsync(IJournal? journal = null, FakeTimeProvider? time = null)
    {
        var kept = journal ?? new MemoryJournal();
        var clock = time ?? new FakeTimeProvider(Start);
        var data = Directory.CreateTempSubdirectory("couplingwatch-").FullName;
        var app = WatchServer.Create(["--data", data], build: builder =>
        {
            builder.WebHost.UseTestServer();
            builder.Logging.ClearProviders();
            builder.Services.AddSingleton(kept);
            builder.Services.AddSingleton<TimeProvider>(clock);
        });
        await app.StartAsync();
        return new WatchUnderTest(app, kept, clock, data);
    }

    public Task<HttpResponseMessage> PostAsync(string run, string lines, string? instance = null) =>
        Http.PostAsync($"/api/runs/{run}/records{(instance is null ? "" : "?instance=" + instance)}", RecordsBody(lines));

    /// <summary>Posts and expects 200.</summary>
    public async Task<long> AcceptAsync(string run, string lines, string? instance = null)
    {
        using var answer = await PostAsync(run, lines, instance);
        Assert.True(answer.IsSuccessStatusCode, await answer.Content.ReadAsStringAsync());
        return (await JsonOf(answer))["next"]!.GetValue<long>();
    }

    public static HttpContent RecordsBody(string lines)
    {
        var content = new ByteArrayContent(Encoding.UTF8.GetBytes(lines));
        content.Headers.ContentType = new MediaTypeHeaderValue("application/x-ndjson");
        return content;
    }

    public static HttpContent Json(object body) => new StringContent(JsonSerializer.Serialize(body, WireJson.Options), Encoding.UTF8, "application/json");

    public async Task<JsonObject> GetAsync(string address)
    {
        using var answer = await Http.GetAsync(address);
        Assert.True(answer.IsSuccessStatusCode, address + ": " + await answer.Content.ReadAsStringAsync());
        return await JsonOf(answer);
    }

    public static async Task<JsonObject> JsonOf(HttpResponseMessage answer) => JsonNode.Parse(await answer.Content.ReadAsStringAsync())!.AsObject();

    /// <summary>The answer is this fault, as a problem.</summary>
    public static async Task<JsonObject> FaultAsync(HttpResponseMessage answer, int status, string name)
    {
        var text = await answer.Content.ReadAsStringAsync();
        Assert.True(status == (int)answer.StatusCode, $"{(int)answer.StatusCode}: {text}");
        Assert.Equal("application/problem+json", answer.Content.Headers.ContentType?.MediaType);
        var problem = JsonNode.Parse(text)!.AsObject();
        Assert.Equal("/problems/" + name, problem["type"]!.GetValue<string>());
        Assert.Equal(status, problem["status"]!.GetValue<int>());
        Assert.NotEmpty(problem["detail"]!.GetValue<string>());
        return problem;
    }

    public bool TryHost(string run, [System.Diagnostics.CodeAnalysis.NotNullWhen(true)] out CouplingWatch.Server.Runs.RunHost? host) => App.Services.GetRequiredService<CouplingWatch.Server.Runs.RunRegistry>().TryFind(NameOf(run), out host);

    /// <summary>Asks again until it holds; what it waits for happens on another thread of this process.</summary>
    public async Task UntilAsync(Func<Task<bool>> holds)
    {
        using var deadline = new CancellationTokenSource(TimeSpan.FromSeconds(60));
        while (!await holds())
        {
            Assert.False(deadline.IsCancellationRequested, "It did not come to hold within a minute.");
            await Task.Yield();
        }
    }

    public async ValueTask DisposeAsync()
    {
        Http.Dispose();
        if (data is null) return;
        await App.StopAsync();
        await App.DisposeAsync();
        Directory.Delete(data, recursive: true);
    }
}
