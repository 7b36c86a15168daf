using System.Globalization;
using CouplingWatch.Monitoring.Race;
using CouplingWatch.Sweeps;

CultureInfo.CurrentCulture = CultureInfo.InvariantCulture;
return args switch
{
    ["counts", ..] => Counts(),
    ["races", ..] => Races(),
    ["rules", ..] => Rules(),
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
    var options = args.Contains("--mended") ? RaceOptions.Mended : RaceOptions.Plain;
    var seed = long.Parse(Option("--seed") ?? "1", CultureInfo.InvariantCulture);
    var jobs = from variant in Chosen() from start in Starts.All select (variant, start);
    var threads = int.Parse(Option("--threads") ?? "1", CultureInfo.InvariantCulture);
    var trials = jobs.AsParallel().AsOrdered().WithDegreeOfParallelism(threads)
        .Select(job => RaceTrial.Run(job.variant, job.start, options, seed)).AsEnumerable().OfType<RaceTrial>()
        .Select(trial =>
        {
            if (args.Contains("--each")) Console.WriteLine(RaceTable.Line(trial));
            return trial;
        }).ToList();
    RaceTable.Print(Console.Out, trials);
    return trials.Any(t => t.Harmful) ? 1 : 0;
}

int Rules()
{
    var seeds = int.Parse(Option("--seeds") ?? "3", CultureInfo.InvariantCulture);
    var threads = int.Parse(Option("--threads") ?? "1", CultureInfo.InvariantCulture);
    var whole = new WholeRuns();
    foreach (var (name, options) in RuleSets.All.Where(r => Option("--set") is not { } only || only.Split('|').Any(o => r.Name.Contains(o, StringComparison.Ordinal))))
    {
        var jobs = from variant in Chosen() from start in Starts.All from seed in Enumerable.Range(1, seeds) select (variant, start, seed);
        var trials = jobs.AsParallel().AsOrdered().WithDegreeOfParallelism(threads).Select(job => RaceTrial.Run(job.variant, job.start, options, job.seed, whole)).OfType<RaceTrial>().ToList();
        Console.WriteLine(RaceTable.Summary(name, trials));
        if (args.Contains("--each")) foreach (var trial in trials) Console.WriteLine(RaceTable.Line(trial));
    }
    return 0;
}

IEnumerable<Variant> Chosen() => Variants.All.Where(v => args.Contains("--held") ? v.Held : !args.Contains("--tuning") || !v.Held).Where(v => Option("--only") is not { } only || v.Name == only);

string? Option(string name) => Array.IndexOf(args, name) is var at and >= 0 && at + 1 < args.Length ? args[at + 1] : null;

int Usage()
{
    Console.Error.WriteLine("""
        races  [--tuning | --held] [--only NAME] [--seed N] [--threads N] [--mended] [--each]   races on variants of both samples from eight starting settings
        rules  [--tuning | --held] [--seeds N] [--set NAME] [--each]                  the same, quicker, for several sets of rules
        counts [--tuning | --held] [--only NAME]                                     iterations of the first 60 steps
        """);
    return 2;
}
