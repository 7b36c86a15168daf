using CouplingWatch.Components.Feed;
using CouplingWatch.Monitoring;
using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Server.Live;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Runs;
using CouplingWatch.Server.Trials;
using CouplingWatch.Wire;
using Microsoft.Extensions.DependencyInjection.Extensions;
using Microsoft.Extensions.Logging.Console;

namespace CouplingWatch.Server.Host;

/// <summary>What the server is made of.</summary>
internal static class Services
{
    public static void AddWatchServer(this IServiceCollection services, WatchServerOptions options)
    {
        services.AddSingleton(options);
        services.TryAddSingleton(TimeProvider.System);
        services.TryAddSingleton<MonitorOptions>();
        services.AddSingleton<ChangeSignals>().AddSingleton<HubWatchers>().AddSingleton<LiveUpdates>().AddSingleton<IWatchFeed, WatchFeed>().AddSingleton<ITrialFeed, TrialFeed>();
        services.AddSingleton(s => new RunSurroundings(s.GetRequiredService<IJournal>(), s.GetRequiredService<LiveUpdates>(), s.GetRequiredService<MonitorOptions>(),
            s.GetRequiredService<TimeProvider>(), s.GetRequiredService<ILoggerFactory>().CreateLogger<RunHost>()));
        services.AddSingleton<RunRegistry>().AddSingleton<RehearsalDesk>().AddSingleton<RaceStart>();
        services.AddHostedService<StartChecks>();
        services.AddHosted<HubOutbox>().AddHosted<JournalReplay>().AddHosted<ClockWatch>();
    }

    public static void AddWatchSite(this IServiceCollection services)
    {
        services.AddRazorComponents().AddInteractiveServerComponents();
        services.AddWatchComponents();
        services.ConfigureHttpJsonOptions(o => WireJson.Configure(o.SerializerOptions));
        services.AddSignalR().AddJsonProtocol(o => WireJson.Configure(o.PayloadSerializerOptions));
        services.AddProblemDetails();
        services.AddExceptionHandler<FaultAnswers>();
        services.Configure<RouteHandlerOptions>(o => o.ThrowOnBadRequest = true);
        services.AddOpenApi("v1");
    }

    public static void AddQuietLog(this ILoggingBuilder logging)
    {
        logging.AddSimpleConsole(o =>
        {
            o.SingleLine = true;
            o.TimestampFormat = "HH:mm:ss ";
            o.ColorBehavior = LoggerColorBehavior.Default;
        });
        // A start that fails is said in one line by the program itself.
        logging.AddFilter("Microsoft.Extensions.Hosting.Internal.Host", LogLevel.Critical);
        logging.AddFilter("Microsoft.AspNetCore.DataProtection", LogLevel.Error);
    }

    private static IServiceCollection AddHosted<T>(this IServiceCollection services) where T : class, IHostedService =>
        services.AddSingleton<T>().AddHostedService(s => s.GetRequiredService<T>());
}
