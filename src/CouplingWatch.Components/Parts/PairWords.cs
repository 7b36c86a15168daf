using CouplingWatch.Components.Formatting;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Parts;

/// <summary>What the pairs of dashes say in words. Pure.</summary>
public static class PairWords
{
    /// <summary><c>six passes, closing</c>.</summary>
    public static string Label(IReadOnlyList<PassPair> passes)
    {
        ArgumentNullException.ThrowIfNull(passes);
        if (passes.Count == 0) return "no pass yet";
        var text = $"{Numbers.Word(passes.Count)} {(passes.Count == 1 ? "pass" : "passes")}";
        return text + (Tendency(passes) is { } tendency ? ", " + tendency : "");
    }

    /// <summary>closing, apart, opening, met; null while one pass says nothing.</summary>
    public static string? Tendency(IReadOnlyList<PassPair> passes)
    {
        ArgumentNullException.ThrowIfNull(passes);
        if (passes.Count == 0) return null;
        if (passes[^1].Done) return "met";
        if (passes.Count < 2) return null;
        var heights = PairDrawing.Growth(passes);
        var last = heights[^1] - heights[Math.Max(0, heights.Count - 6)];
        return last switch { < -0.3 => "closing", > 0.3 => "opening", _ => "staying apart" };
    }

    /// <summary>The first step of a run, iteration by iteration.</summary>
    public static string FirstStep(IReadOnlyList<PassPair> passes)
    {
        ArgumentNullException.ThrowIfNull(passes);
        return passes.Count == 0 ? "No step yet" : $"First step, {Label(passes)}, no step complete yet";
    }
}
