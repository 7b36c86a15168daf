using System.Reflection;
using Microsoft.AspNetCore.Hosting.Server;
using Microsoft.AspNetCore.Hosting.Server.Features;

namespace CouplingWatch.Server.Host;

/// <summary>Says at the start where the server listens, where it keeps what it is sent, and with which options.</summary>
internal static class Announcement
{
    public static void Announce(WebApplication app, WatchServerOptions options)
    {
        app.Lifetime.ApplicationStarted.Register(() =>
        {
            var addresses = app.Services.GetRequiredService<IServer>().Features.Get<IServerAddressesFeature>()?.Addresses ?? [];
            app.Logger.LogInformation("CouplingWatch {Version} listens at {Addresses} (--urls), on this machine only", Version, string.Join(", ", addresses));
            app.Logger.LogInformation("Data folder {Data} (--data); environment {Environment}; whoever reaches this address is an operator", options.Data, app.Environment.EnvironmentName);
        });
    }

    private static string Version =>
        typeof(Announcement).Assembly.GetCustomAttribute<AssemblyInformationalVersionAttribute>()?.InformationalVersion ?? "";
}
