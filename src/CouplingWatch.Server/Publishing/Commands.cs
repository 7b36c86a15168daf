namespace CouplingWatch.Server.Publishing;

/// <summary>The commands that go with a revision, and how they are written.</summary>
internal static class Commands
{
    public const string DropHistory = "dropHistory";
    /// <summary>A bare <c>stop</c>: after the step.</summary>
    public const string StopAfterStep = "stop";
    public const string StopAfterCheckpoint = "stop:after-checkpoint";
    public const string All = "dropHistory, stop, stop:after-checkpoint";

    /// <summary>The name a run declares for it: what stands before the colon.</summary>
    public static string NameOf(string command) => command.Split(':', 2)[0];

    public static bool IsKnown(string command) => command is DropHistory or StopAfterStep or "stop:after-step" or StopAfterCheckpoint;
}
