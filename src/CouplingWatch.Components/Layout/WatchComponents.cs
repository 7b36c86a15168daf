using CouplingWatch.Components.Layout;
using Microsoft.Extensions.DependencyInjection.Extensions;

namespace Microsoft.Extensions.DependencyInjection;

/// <summary>Registers what the pages need besides <c>IWatchFeed</c>, which the host provides.</summary>
public static class WatchComponents
{
    public static IServiceCollection AddWatchComponents(this IServiceCollection services)
    {
        ArgumentNullException.ThrowIfNull(services);
        services.TryAddSingleton(TimeProvider.System);
        services.TryAddScoped<LiveUpdates>();
        services.TryAddScoped<Viewer>();
        return services;
    }
}
