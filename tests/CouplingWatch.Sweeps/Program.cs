using System.Globalization;
using CouplingWatch.Monitoring.Race;
using CouplingWatch.Sweeps;

CultureInfo.CurrentCulture = CultureInfo.InvariantCulture;
return args switch
{
    ["counts", ..] => Counts(),
    ["races", ..] => Races(),
    _ => Usage(),
};

int Counts()
{
    foreach (var variant in Chosen())
    {
        foreach (var start in Starts.All)
        {
            var run = RacedRun.Scripted(variant, start.Settings, 60, []);
            Console.WriteLine($"{variant.Name,-28} {start.Name,-32} {string.Join(' ', run.Steps.Select(s => s.Count))}");
        }
    }
    return 0;
}

int Races()
{
    var options = new RaceOptions();
    var seed = long.Parse(Option("--seed") ?? "1", CultureInfo.InvariantCulture);
    var jobs = from variant in Chosen() from start in Starts.All select (variant, start);
    var threads = int.Parse(Option("--threads") ?? "1", CultureInfo.InvariantCulture);
    var trials = jobs.AsParallel().AsOrdered().WithDegreeOfParallelism(threads)
        .Select(job => RaceTrial.Run(job.variant, job.start, options, seed)).AsEnumerable()
        .Select(trial =>
        {
            if (args.Contains("--each")) Console.WriteLine(RaceTable.Line(trial));
            return trial;
        }).ToList();
    RaceTable.Print(Console.Out, trials);
    return trials.Any(t => t.Harmful) ? 1 : 0;
}

IEnumerable<Variant> Chosen() => Variants.All.Where(v => args.Contains("--held") ? v.Held : !args.Contains("--tuning") || !v.Held).Where(v => Option("--only") is not { } only || v.Name == only);

string? Option(string name) => Array.IndexOf(args, name) is var at and >= 0 && at + 1 < args.Length ? args[at + 1] : null;

int Usage()
{
    Console.Error.WriteLine("""
        races  [--tuning | --held] [--only NAME] [--seed N] [--threads N] [--each]   races on variants of both samples from eight starting settings
        counts [--tuning | --held] [--only NAME]                                     iterations of the first 60 steps
        """);
    return 2;
}
