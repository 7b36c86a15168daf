namespace CouplingWatch.Cli;

/// <summary>What the commands answer to a shell.</summary>
internal static class ExitCodes
{
    /// <summary>Nothing at or above the named severity.</summary>
    public const int Ok = 0;

    /// <summary>Something was.</summary>
    public const int Found = 1;

    /// <summary>The file could not be read as a stream, or the call's words are off.</summary>
    public const int Unreadable = 2;
}
