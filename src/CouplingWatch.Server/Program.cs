using CouplingWatch.Server;

return await WatchServer.RunAsync(args);

/// <summary>The entry point, public so that tests can host the program.</summary>
public partial class Program;
