namespace CouplingWatch.Server;

/// <summary>What can be set by command line, environment, <c>appsettings.json</c> (section <c>CouplingWatch</c>) or the hosting program.</summary>
public sealed class WatchServerOptions
{
    public const string Section = "CouplingWatch";

    /// <summary>Folder of the journal; relative to the working directory. <c>--data FOLDER</c>, <c>CouplingWatch:Data</c>, <c>CouplingWatch__Data</c>.</summary>
    public string Data { get; set; } = "data";
}
