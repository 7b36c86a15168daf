using System.Net;
using System.Net.Sockets;
using CouplingWatch.Server.Host;

namespace CouplingWatch.Server.Tests.Host;

public sealed class Starting : IDisposable
{
    private readonly string data = Directory.CreateTempSubdirectory("couplingwatch-").FullName;

    [Theory]
    [InlineData("http://0.0.0.0:5080", "0.0.0.0")]
    [InlineData("http://*:5080", "*")]
    [InlineData("http://+:5080", "+")]
    [InlineData("http://192.168.1.7:5080", "192.168.1.7")]
    [InlineData("http://[::]:5080", "[::]")]
    [InlineData("http://login-node:5080", "login-node")]
    [InlineData("http://localhost:5080;http://10.0.0.1:5080", "10.0.0.1")]
    public void It_does_not_listen_to_other_machines(string urls, string named)
    {
        var refused = Assert.Throws<StartException>(() => WatchServer.Create(["--data", data, "--urls", urls]));
        Assert.Contains("--urls", refused.Message, StringComparison.Ordinal);
        Assert.Contains(named, refused.Message, StringComparison.Ordinal);
        Assert.DoesNotContain('\n', refused.Message);
    }

    [Theory]
    [InlineData("--http_ports", "8080", "http_ports")]
    [InlineData("--Kestrel:Endpoints:Outside:Url", "http://0.0.0.0:8080", "Kestrel:Endpoints:Outside:Url")]
    public void No_other_option_opens_it_to_other_machines(string option, string value, string named) =>
        Assert.Contains(named, Assert.Throws<StartException>(() => WatchServer.Create(["--data", data, option, value])).Message, StringComparison.Ordinal);

    [Theory]
    [InlineData("http://localhost:0")]
    [InlineData("http://127.0.0.1:0;http://[::1]:0")]
    public async Task This_machine_s_own_addresses_are_taken(string urls) => await WatchServer.Create(["--data", data, "--urls", urls]).DisposeAsync();

    [Fact]
    public async Task Without_a_word_it_listens_on_this_machine_only()
    {
        await using var app = WatchServer.Create(["--data", data]);
        Assert.Equal("http://localhost:5080", app.Configuration["urls"]);
    }

    [Fact]
    public async Task A_data_folder_that_cannot_be_written_ends_the_start_with_one_line()
    {
        var file = Path.Combine(data, "a-file");
        await File.WriteAllTextAsync(file, "", TestContext.Current.CancellationToken);
        using var error = new StringWriter();
        var code = await WatchServer.RunAsync(["--data", Path.Combine(file, "below")], null, null, error);
        Assert.NotEqual(0, code);
        Assert.StartsWith("--data " + file, error.ToString(), StringComparison.Ordinal);
        Assert.Single(error.ToString().Split('\n', StringSplitOptions.RemoveEmptyEntries));
    }

    [Fact]
    public async Task A_port_that_is_taken_ends_the_start_with_one_line_naming_the_option()
    {
        using var taken = new TcpListener(IPAddress.Loopback, 0);
        taken.Start();
        var urls = $"http://127.0.0.1:{((IPEndPoint)taken.LocalEndpoint).Port}";
        using var error = new StringWriter();
        var code = await WatchServer.RunAsync(["--data", data, "--urls", urls], null, null, error);
        Assert.NotEqual(0, code);
        Assert.StartsWith("--urls " + urls, error.ToString(), StringComparison.Ordinal);
        Assert.Single(error.ToString().Split('\n', StringSplitOptions.RemoveEmptyEntries));
    }

    [Fact]
    public async Task The_data_folder_is_made_and_told_in_full()
    {
        var below = Path.Combine(data, "new", "folder");
        WatchServerOptions? seen = null;
        await using var app = WatchServer.Create(["--data", below], o => seen = o);
        Assert.True(Directory.Exists(below));
        Assert.Equal(below, seen!.Data);
    }

    public void Dispose() => Directory.Delete(data, recursive: true);
}
