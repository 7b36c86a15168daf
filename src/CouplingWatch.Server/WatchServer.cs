using System.Reflection;
using CouplingWatch.Components.Feed;
using CouplingWatch.Server.Host;
using CouplingWatch.Server.Site;

namespace CouplingWatch.Server;

/// <summary>The public entry: builds the server as a web application, for its own program and for others that host it.</summary>
public static class WatchServer
{
    /// <summary>Builds the application; it does not listen before it is started.</summary>
    /// <param name="args">Command line by ASP.NET Core's conventions: <c>--urls</c>, <c>--data FOLDER</c>, any configuration key.</param>
    /// <param name="configure">Changes options after configuration was read.</param>
    /// <param name="build">Changes services and the host before it is built; for tests and for programs with services of their own.</param>
    public static WebApplication Create(string[] args, Action<WatchServerOptions>? configure = null, Action<WebApplicationBuilder>? build = null)
    {
        ArgumentNullException.ThrowIfNull(args);
        var builder = WebApplication.CreateBuilder(SitePlace.Options(args));
        builder.WebHost.UseStaticWebAssets();
        builder.Services.AddRazorComponents().AddInteractiveServerComponents();
        builder.Services.AddWatchComponents();
        build?.Invoke(builder);

        var app = builder.Build();
        app.UseAntiforgery();
        app.MapStaticAssets();
        app.MapRazorComponents<App>()
            .AddAdditionalAssemblies(typeof(IWatchFeed).Assembly)
            .AddInteractiveServerRenderMode();
        return app;
    }

    /// <summary>Creates, runs until stopped, and answers the exit code.</summary>
    public static async Task<int> RunAsync(string[] args, Action<WatchServerOptions>? configure = null)
    {
        var app = Create(args, configure);
        await app.RunAsync();
        return 0;
    }
}
