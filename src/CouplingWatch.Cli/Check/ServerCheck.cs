using System.Net;
using CouplingWatch.Client;

namespace CouplingWatch.Cli.Check;

/// <summary><c>check URL</c>: whether a server is there, can take records, and whether a run's name is still free.</summary>
internal static class ServerCheck
{
    public static async Task<int> RunAsync(Uri server, string? run, HttpMessageHandler? handler, TextWriter output, CancellationToken cancel)
    {
        using var http = handler is null ? new HttpClient() : new HttpClient(handler, disposeHandler: false);
        http.Timeout = TimeSpan.FromSeconds(15);
        var root = new Uri(server.AbsoluteUri.TrimEnd('/') + "/");
        try
        {
            using var ready = await http.GetAsync(new Uri(root, "readyz"), cancel);
            if (!ready.IsSuccessStatusCode)
            {
                await output.WriteLineAsync($"{server} answers {(int)ready.StatusCode}: it cannot take records now.");
                return ExitCodes.Unreadable;
            }
            await output.WriteLineAsync($"{server} is ready to take records.");
            if (run is null) return ExitCodes.Ok;
            if (!RunName.IsAllowed(run))
            {
                await output.WriteLineAsync($"The name \"{run}\" is not allowed: 1–64 of a-z0-9-_. beginning with a letter or digit.");
                return ExitCodes.Unreadable;
            }
            using var known = await http.GetAsync(new Uri(root, $"api/runs/{run}"), cancel);
            var free = known.StatusCode == HttpStatusCode.NotFound;
            await output.WriteLineAsync(free ? $"The name {run} is free." : known.IsSuccessStatusCode ? $"The name {run} is taken: choose another one." : $"Whether the name {run} is free could not be seen: {(int)known.StatusCode}.");
            return free ? ExitCodes.Ok : ExitCodes.Unreadable;
        }
        catch (Exception thrown) when (thrown is HttpRequestException || (thrown is OperationCanceledException && !cancel.IsCancellationRequested))
        {
            await output.WriteLineAsync($"{server} does not answer: {thrown.Message}");
            return ExitCodes.Unreadable;
        }
    }
}
