using System.Globalization;

namespace Demo.Campaign;

/// <summary>What the demo takes from the command line; everything else goes to the server.</summary>
/// <param name="Speed">Factor on the pace of the runs and on the pauses between them, 0.1 to 50.</param>
/// <param name="Lanes">Which runs, by the names of <see cref="DemoLanes"/>; all when empty.</param>
/// <param name="Server">Arguments left over for the server.</param>
public sealed record DemoOptions(double Speed, IReadOnlyList<string> Lanes, string[] Server)
{
    /// <summary>Reads <c>--demo-speed X</c> and <c>--runs a,b</c>.</summary>
    /// <exception cref="ArgumentException">A value is missing or out of range; the message says which.</exception>
    public static DemoOptions Parse(IReadOnlyList<string> args)
    {
        ArgumentNullException.ThrowIfNull(args);
        var speed = 1.0;
        IReadOnlyList<string> lanes = [];
        var server = new List<string>();
        for (var i = 0; i < args.Count; i++)
        {
            if (args[i] is not ("--demo-speed" or "--runs"))
            {
                server.Add(args[i]);
                continue;
            }
            if (i + 1 >= args.Count) throw new ArgumentException($"{args[i]} needs a value.");
            var value = args[++i];
            if (args[i - 1] == "--runs") lanes = Names(value);
            else if (!double.TryParse(value, CultureInfo.InvariantCulture, out speed) || !(speed is >= 0.1 and <= 50))
                throw new ArgumentException($"--demo-speed {value}: a factor between 0.1 and 50 is needed.");
        }
        return new DemoOptions(speed, lanes, [.. server]);
    }

    private static string[] Names(string value)
    {
        var names = value.Split(',', StringSplitOptions.RemoveEmptyEntries | StringSplitOptions.TrimEntries);
        var unknown = names.Except(DemoLanes.All.Select(l => l.Key)).ToList();
        if (names.Length == 0 || unknown.Count > 0)
            throw new ArgumentException($"--runs {value}: some of {string.Join(",", DemoLanes.All.Select(l => l.Key))} are needed.");
        return names;
    }
}
