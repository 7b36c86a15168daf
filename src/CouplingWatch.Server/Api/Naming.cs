namespace CouplingWatch.Server.Api;

/// <summary>How a call stands in the description of the interface.</summary>
internal static class Naming
{
    public static RouteHandlerBuilder Named(this RouteHandlerBuilder call, string name, string summary) => call.WithName(name).WithSummary(summary);

    /// <summary>The statuses it may answer with a problem.</summary>
    public static RouteHandlerBuilder Faults(this RouteHandlerBuilder call, params int[] statuses)
    {
        foreach (var status in statuses) call.ProducesProblem(status);
        return call;
    }
}
