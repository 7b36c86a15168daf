using CouplingWatch.Server;

return await WatchServer.RunAsync(args);
