namespace CouplingWatch.Server;

/// <summary>What can be set by command line, environment, <c>appsettings.json</c> or the hosting program.</summary>
public sealed class WatchServerOptions
{
    /// <summary>Where the journal lies; relative to the working directory. <c>--data FOLDER</c> or <c>CouplingWatch:Data</c>.</summary>
    public string Data { get; set; } = "data";
}
