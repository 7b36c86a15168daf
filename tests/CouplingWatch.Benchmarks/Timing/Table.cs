using System.Globalization;

namespace CouplingWatch.Benchmarks.Timing;

/// <summary>Prints results as the rows of a Markdown table.</summary>
internal sealed class Table
{
    internal Table()
    {
        Console.WriteLine("| what | measured | against | ratio | goal |");
        Console.WriteLine("| --- | --- | --- | --- | --- |");
    }

    internal void Row(string what, double seconds, string against, double otherSeconds, double ratio, string goal) =>
        Console.WriteLine($"| {what} | {Time(seconds)} | {against}: {Time(otherSeconds)} | {ratio.ToString(ratio < 10 ? "F2" : "F0", CultureInfo.InvariantCulture)} | {goal} |");

    internal void Row(string what, double seconds, string goal) => Console.WriteLine($"| {what} | {Time(seconds)} | – | – | {goal} |");

    internal void Skipped(string what, string why) => Console.WriteLine($"| {what} | not measured: {why} | – | – | – |");

    private static string Time(double seconds) => seconds switch
    {
        < 1e-6 => (seconds * 1e9).ToString("F1", CultureInfo.InvariantCulture) + " ns",
        < 1e-3 => (seconds * 1e6).ToString("F2", CultureInfo.InvariantCulture) + " µs",
        < 1 => (seconds * 1e3).ToString("F2", CultureInfo.InvariantCulture) + " ms",
        _ => seconds.ToString("F2", CultureInfo.InvariantCulture) + " s",
    };
}
