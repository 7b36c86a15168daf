using System.Net.Sockets;
using CouplingWatch.Components.Feed;
using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Server.Access;
using CouplingWatch.Server.Api;
using CouplingWatch.Server.Host;
using CouplingWatch.Server.Live;
using CouplingWatch.Server.Site;
using CouplingWatch.Storage.Sqlite;
using Microsoft.AspNetCore.Connections;
using Microsoft.Extensions.DependencyInjection.Extensions;

namespace CouplingWatch.Server;

/// <summary>The public entry: builds the server as a web application, for its own program and for others that host it.</summary>
public static class WatchServer
{
    private static readonly Dictionary<string, string> Switches = new() { ["--data"] = WatchServerOptions.Section + ":" + nameof(WatchServerOptions.Data) };

    /// <summary>Builds the application; it does not listen before it is started.</summary>
    /// <param name="args">Command line by ASP.NET Core's conventions: <c>--urls</c>, <c>--data FOLDER</c>, any configuration key.</param>
    /// <param name="configure">Changes options after configuration was read.</param>
    /// <param name="build">Changes services and the host before it is built; for tests and for programs with services of their own.</param>
    /// <exception cref="StartException">It would listen to other machines, or the data folder cannot be written.</exception>
    public static WebApplication Create(string[] args, Action<WatchServerOptions>? configure = null, Action<WebApplicationBuilder>? build = null)
    {
        ArgumentNullException.ThrowIfNull(args);
        var builder = WebApplication.CreateBuilder(SitePlace.Options(args));
        builder.Configuration.AddCommandLine(args, Switches);
        builder.WebHost.UseStaticWebAssets();
        builder.Logging.AddQuietLog();
        var options = builder.Configuration.GetSection(WatchServerOptions.Section).Get<WatchServerOptions>() ?? new WatchServerOptions();
        configure?.Invoke(options);
        if (Binding.Addresses(builder.Configuration) is { Count: > 0 } addresses) builder.WebHost.UseUrls([.. addresses]);
        options.Data = DataFolder.Open(options.Data);
        builder.Services.AddWatchServer(options);
        builder.Services.AddWatchSite();
        build?.Invoke(builder);
        builder.Services.TryAddSingleton<IJournal>(s => new SqliteJournal(options.Data, s.GetService<TimeProvider>()));

        var app = builder.Build();
        Announcement.Announce(app, options);
        app.UseExceptionHandler();
        app.UseSiteSecurity();
        app.UseOwnSiteOnly();
        app.UseStatusCodePages();
        app.UseAntiforgery();
        app.MapInterface();
        app.MapHub<WatchHub>(WatchHub.Address);
        app.MapStaticAssets();
        app.MapRazorComponents<App>()
            .AddAdditionalAssemblies(typeof(IWatchFeed).Assembly)
            .AddInteractiveServerRenderMode(o => o.ContentSecurityFrameAncestorsPolicy = null);
        return app;
    }

    /// <summary>Creates, runs until stopped, and answers the exit code: 0, or 1 with one line on standard error when it could not start.</summary>
    public static Task<int> RunAsync(string[] args, Action<WatchServerOptions>? configure = null, Action<WebApplicationBuilder>? build = null) =>
        RunAsync(args, configure, build, Console.Error);

    internal static async Task<int> RunAsync(string[] args, Action<WatchServerOptions>? configure, Action<WebApplicationBuilder>? build, TextWriter error)
    {
        try
        {
            await using var app = Create(args, configure, build);
            try { await app.StartAsync(); }
            catch (IOException e) when (e.InnerException is AddressInUseException or SocketException)
            {
                throw new StartException($"--urls {app.Configuration["urls"]}: {e.Message} Choose another port, for example --urls http://localhost:5081.", e);
            }
            await app.WaitForShutdownAsync();
            return 0;
        }
        catch (StartException e)
        {
            await error.WriteLineAsync(e.Message);
            return 1;
        }
    }
}
