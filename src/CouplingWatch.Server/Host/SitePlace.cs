using System.Reflection;

namespace CouplingWatch.Server.Host;

/// <summary>Finds the files that belong to the program, from wherever it was started.</summary>
internal static class SitePlace
{
    /// <summary>Content root is the folder of the binaries when <c>appsettings.json</c> lies there; the application name picks the manifest of static assets.</summary>
    public static WebApplicationOptions Options(string[] args)
    {
        var here = AppContext.BaseDirectory;
        return new WebApplicationOptions
        {
            Args = args,
            ApplicationName = HostingProgram(here),
            ContentRootPath = File.Exists(Path.Combine(here, "appsettings.json")) ? here : null,
        };
    }

    /// <summary>The program that was started, when it carries a manifest of static assets; this assembly otherwise (a test runner).</summary>
    private static string HostingProgram(string folder)
    {
        var entry = Assembly.GetEntryAssembly()?.GetName().Name;
        return entry is not null && File.Exists(Path.Combine(folder, entry + ".staticwebassets.endpoints.json"))
            ? entry
            : typeof(SitePlace).Assembly.GetName().Name!;
    }
}
