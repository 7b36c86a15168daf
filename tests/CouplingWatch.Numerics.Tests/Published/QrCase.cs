using System.Globalization;

namespace CouplingWatch.Numerics.Tests.Published;

/// <summary>Columns of a matrix of tests/reference/qr-cases.</summary>
internal static class QrCase
{
    internal static double[][] Load(string name)
    {
        double[][] rows = [.. File.ReadLines(Path.Combine(AppContext.BaseDirectory, "reference", $"qr_{name}.txt"))
            .Select(l => l.Split(' ').Select(t => double.Parse(t, CultureInfo.InvariantCulture)).ToArray())];
        return [.. Enumerable.Range(0, rows[0].Length).Select(j => rows.Select(r => r[j]).ToArray())];
    }
}
