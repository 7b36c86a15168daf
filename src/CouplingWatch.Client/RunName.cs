using System.Buffers;

namespace CouplingWatch.Client;

/// <summary>The rule of run names.</summary>
public static class RunName
{
    private static readonly SearchValues<char> Allowed = SearchValues.Create("abcdefghijklmnopqrstuvwxyz0123456789-_.");

    public static bool IsAllowed(string run) =>
        run.Length is >= 1 and <= 64 && (char.IsAsciiLetterLower(run[0]) || char.IsAsciiDigit(run[0])) && !run.AsSpan().ContainsAnyExcept(Allowed);

    /// <exception cref="ArgumentException">The name is not allowed.</exception>
    public static void Check(string run)
    {
        ArgumentNullException.ThrowIfNull(run);
        if (!IsAllowed(run)) throw new ArgumentException($"A run's name is 1–64 of a-z0-9-_. and begins with a letter or digit; it was \"{run}\".", nameof(run));
    }
}
