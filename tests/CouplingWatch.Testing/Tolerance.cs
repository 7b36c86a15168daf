namespace CouplingWatch.Testing;

/// <summary>Comparisons of numbers that say by how much they failed.</summary>
public static class Tolerance
{
    /// <summary>|actual − expected| ≤ relative · |expected| + absolute; NaN is close to nothing.</summary>
    public static void Close(double expected, double actual, double relative, double absolute = 0)
    {
        var off = Math.Abs(actual - expected);
        ContractBrokenException.Unless(off <= (relative * Math.Abs(expected)) + absolute, $"expected {expected:R} within {relative:R} relative and {absolute:R} absolute, found {actual:R}, off by {off:R}");
    }

    /// <summary>Every entry close to its partner.</summary>
    public static void Close(ReadOnlySpan<double> expected, ReadOnlySpan<double> actual, double relative, double absolute = 0)
    {
        ContractBrokenException.Equal(expected.Length, actual.Length, "length");
        for (var i = 0; i < expected.Length; i++)
        {
            var off = Math.Abs(actual[i] - expected[i]);
            ContractBrokenException.Unless(off <= (relative * Math.Abs(expected[i])) + absolute, $"entry {i}: expected {expected[i]:R}, found {actual[i]:R}, off by {off:R}");
        }
    }
}
