namespace CouplingWatch.Ndjson;

/// <summary>Bounds of one reading.</summary>
/// <param name="LineBytes">Longest line taken; a longer one is a <c>too-long</c> problem and is passed over.</param>
public sealed record NdjsonLimits(int LineBytes = NdjsonLimits.DefaultLineBytes)
{
    public const int DefaultLineBytes = 64 * 1024 * 1024;

    public static NdjsonLimits Default { get; } = new();
}
