using System.Globalization;

namespace CoupledRuns;

/// <summary>The command line of a sample: <c>--server URL --run NAME --case CASE --pace RATE --steps N</c>.</summary>
/// <param name="Server">Where the records go; null: to the file <c>NAME.ndjson</c>.</param>
/// <param name="Run">Name of the run.</param>
/// <param name="Case">Which case.</param>
/// <param name="Pace">Iterations a second at most; 0 for no limit.</param>
/// <param name="Steps">Number of time steps.</param>
public sealed record SampleOptions(Uri? Server, string Run, string Case, double Pace, int Steps)
{
    /// <summary>Reads a command line.</summary>
    /// <param name="args">As given.</param>
    /// <param name="prefix">Begins the name of a run that is not named.</param>
    /// <param name="cases">The cases there are, with what each shows.</param>
    /// <param name="trouble">What is wrong, or how to call the sample when it asked for help; null when all is well.</param>
    public static SampleOptions? Parse(IReadOnlyList<string> args, string prefix, IReadOnlyDictionary<string, string> cases, out string? trouble)
    {
        ArgumentNullException.ThrowIfNull(args);
        ArgumentNullException.ThrowIfNull(cases);
        var given = new Dictionary<string, string>();
        trouble = null;
        for (var i = 0; i < args.Count; i += 2)
        {
            if (args[i] is not ("--server" or "--run" or "--case" or "--pace" or "--steps")) trouble = Usage(cases, args[i]);
            else if (i + 1 >= args.Count) trouble = $"{args[i]} needs a value.";
            if (trouble is not null) return null;
            given[args[i][2..]] = args[i + 1];
        }
        var name = given.GetValueOrDefault("case", "steady");
        if (!cases.ContainsKey(name)) trouble = $"--case {name}: there is {string.Join(", ", cases.Keys)}.";
        Uri? server = null;
        if (given.TryGetValue("server", out var address) && !Uri.TryCreate(address, UriKind.Absolute, out server))
            trouble = $"--server {address}: a URL such as http://localhost:5080 is needed.";
        var pace = 0.0;
        if (given.TryGetValue("pace", out var rate) && !(double.TryParse(rate, CultureInfo.InvariantCulture, out pace) && pace >= 0))
            trouble = $"--pace {rate}: iterations a second, 0 or more.";
        var steps = int.MaxValue;
        if (given.TryGetValue("steps", out var number) && !(int.TryParse(number, CultureInfo.InvariantCulture, out steps) && steps > 0))
            trouble = $"--steps {number}: a whole number, 1 or more.";
        return trouble is null ? new SampleOptions(server, given.GetValueOrDefault("run", $"{prefix}-{name}"), name, pace, steps) : null;
    }

    private static string Usage(IReadOnlyDictionary<string, string> cases, string unknown) => string.Join(Environment.NewLine,
    [
        unknown is "--help" or "-h" or "-?" ? "A coupled run that streams itself." : $"'{unknown}' is no option of this sample.",
        "  --server URL    where to send, such as http://localhost:5080; without it a file NAME.ndjson is written",
        "  --run NAME      name of the run",
        "  --pace RATE     iterations a second at most; as fast as it goes without",
        "  --steps N       number of time steps; endless without",
        "  --case CASE     one of:",
        .. cases.Select(c => $"    {c.Key,-16}{c.Value}"),
    ]);
}
