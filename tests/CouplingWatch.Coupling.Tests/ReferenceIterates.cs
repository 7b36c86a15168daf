using System.Globalization;

namespace CouplingWatch.Coupling.Tests;

/// <summary>Reads the tables of tests/reference/fixed-point-iterates.</summary>
internal static class ReferenceIterates
{
    /// <summary>The rows of numbers below the first line that begins with <paramref name="header"/>.</summary>
    public static IReadOnlyList<double[]> Block(string file, string header)
    {
        var lines = File.ReadAllLines(Path.Combine(AppContext.BaseDirectory, "reference", "fixed-point-iterates", file));
        var at = Array.FindIndex(lines, l => l.StartsWith(header, StringComparison.Ordinal));
        Assert.True(at >= 0, $"{file} has no block '{header}'");
        var rows = new List<double[]>();
        foreach (var line in lines.Skip(at + 1))
        {
            if (line.Length == 0 || !char.IsAsciiDigit(line[0])) break;
            rows.Add([.. line.Split(' ', StringSplitOptions.RemoveEmptyEntries).Select(v => double.Parse(v, NumberStyles.Float, CultureInfo.InvariantCulture))]);
        }
        Assert.NotEmpty(rows);
        return rows;
    }
}
