using CouplingWatch.Server;
using Demo.Campaign;

DemoOptions options;
try
{
    options = DemoOptions.Parse(args);
}
catch (ArgumentException e)
{
    await Console.Error.WriteLineAsync(e.Message);
    return 2;
}
return await WatchServer.RunAsync(options.Server, build: builder =>
{
    builder.Services.AddSingleton(options);
    builder.Services.AddHostedService<CampaignService>();
});
