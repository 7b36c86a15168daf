using CouplingWatch.Client;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CoupledRuns;

/// <summary>The line of a run to a server, or to a file when there is none.</summary>
/// <param name="sender">Opened sender; not disposed here.</param>
public sealed class SenderLink(RunSender sender) : IRunLink
{
    public int NewestRevision => sender.NewestRevision;

    public void Send(StreamRecord record) => sender.Send(record);

    public async Task<SettingsRevision?> ReadSettingsAsync(CancellationToken stop)
    {
        try
        {
            return await sender.ReadSettingsAsync(stop);
        }
        catch (Exception e) when (e is HttpRequestException or IOException or TimeoutException)
        {
            return null; // asked again at the next step
        }
    }
}
