using System.Text.Json;
using CouplingWatch.Wire;

namespace CouplingWatch.Cli.Examine;

/// <summary>What an earlier examination found: by file name, the checks that raised an alert.</summary>
internal sealed class Baseline
{
    private readonly HashSet<(string File, string Check)> known = [];

    public static Baseline None { get; } = new();

    public bool Has(string file, string check) => known.Contains((file, check));

    /// <summary>Reads the output of <c>examine --json</c>, one object a line.</summary>
    public static async Task<Baseline> ReadAsync(string path, CancellationToken cancel)
    {
        var baseline = new Baseline();
        await foreach (var line in File.ReadLinesAsync(path, cancel))
        {
            if (string.IsNullOrWhiteSpace(line)) continue;
            var examination = JsonSerializer.Deserialize<Examination>(line, WireJson.Options) ?? throw new JsonException("a line holds null where an examination was expected");
            foreach (var alert in examination.Alerts) baseline.known.Add((Path.GetFileName(examination.File), alert.Check));
        }
        return baseline;
    }
}
