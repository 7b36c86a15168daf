using System.Diagnostics;
using System.Text.RegularExpressions;

namespace CouplingWatch.Samples.Tests.Site;

/// <summary>The demo hosts the server inside its own program; the files of the site must come along, from whatever folder it is started.</summary>
public sealed partial class ServingTheSite : IDisposable
{
    private readonly string data = Directory.CreateTempSubdirectory("couplingwatch-demo-").FullName;
    private Process? demo;

    [Fact]
    public async Task The_demo_serves_the_pages_with_their_styles_scripts_and_the_chart_library()
    {
        var cancel = TestContext.Current.CancellationToken;
        using var http = new HttpClient { BaseAddress = await StartAsync(cancel) };
        foreach (var address in new[] { "/", "/_framework/blazor.web.js", "/css/tokens.css", "/css/parts.css", "/js/start.js", "/lib/apexcharts/apexcharts.esm.js", "/lib/apexcharts/apexcharts.css", "/healthz" })
        {
            using var answer = await http.GetAsync(address, cancel);
            Assert.True((int)answer.StatusCode == 200, $"{address}: {(int)answer.StatusCode}");
            Assert.True((await answer.Content.ReadAsByteArrayAsync(cancel)).Length > 0, address);
        }
    }

    private async Task<Uri> StartAsync(CancellationToken cancel)
    {
        var start = new ProcessStartInfo("dotnet") { WorkingDirectory = data, RedirectStandardOutput = true, RedirectStandardError = true };
        foreach (var argument in new[] { Program(), "--urls", "http://127.0.0.1:0", "--data", data }) start.ArgumentList.Add(argument);
        demo = Process.Start(start)!;
        List<string> said = [];
        using var deadline = CancellationTokenSource.CreateLinkedTokenSource(cancel);
        deadline.CancelAfter(TimeSpan.FromMinutes(2));
        while (await demo.StandardOutput.ReadLineAsync(deadline.Token) is { } line)
        {
            said.Add(line);
            if (Listening().Match(line) is not { Success: true } match) continue;
            _ = demo.StandardOutput.ReadToEndAsync(CancellationToken.None);
            return new Uri(match.Groups[1].Value);
        }
        throw new InvalidOperationException($"The demo ended before it listened: {string.Join('\n', said)} {await demo.StandardError.ReadToEndAsync(cancel)}");
    }

    /// <summary>The demo as it was built beside this test.</summary>
    private static string Program()
    {
        var built = new DirectoryInfo(AppContext.BaseDirectory);
        var root = built;
        while (!File.Exists(Path.Combine(root.FullName, "CouplingWatch.sln"))) root = root.Parent ?? throw new InvalidOperationException("The solution was not found above the test.");
        return Path.Combine(root.FullName, "samples", "Demo", "bin", built.Parent!.Name, built.Name, "Demo.dll");
    }

    [GeneratedRegex(@"listens at (http://\S+)")]
    private static partial Regex Listening();

    public void Dispose()
    {
        if (demo is not null)
        {
            demo.Kill(entireProcessTree: true);
            demo.WaitForExit();
            demo.Dispose();
        }
        Directory.Delete(data, recursive: true);
    }
}
