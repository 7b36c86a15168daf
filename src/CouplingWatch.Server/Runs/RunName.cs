using System.Buffers;
using System.Diagnostics.CodeAnalysis;
using CouplingWatch.Server.Problems;

namespace CouplingWatch.Server.Runs;

/// <summary>The rule for a run's name: 1–64 of <c>a-z0-9-_.</c>, beginning with a letter or a digit.</summary>
internal static class RunName
{
    private static readonly SearchValues<char> Allowed = SearchValues.Create("abcdefghijklmnopqrstuvwxyz0123456789-_.");

    public static bool IsAllowed([NotNullWhen(true)] string? name) =>
        name is { Length: >= 1 and <= 64 } && (char.IsAsciiLetterLower(name[0]) || char.IsAsciiDigit(name[0])) && !name.AsSpan().ContainsAnyExcept(Allowed);

    public static IResult Refuse(string name) => Problem.BadRunName.Because(
        $"“{Shorten(name)}” is not a run name: 1–64 of a-z, 0-9, ‘-’, ‘_’, ‘.’, beginning with a letter or a digit.",
        ("member", "run"), ("expected", "[a-z0-9][a-z0-9._-]{0,63}"));

    private static string Shorten(string name) => name.Length <= 80 ? name : name[..80] + "…";
}
