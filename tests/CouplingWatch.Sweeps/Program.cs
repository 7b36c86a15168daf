using System.Diagnostics;
using System.Globalization;
using CouplingWatch.Monitoring.Race;
using CouplingWatch.Sweeps;

CultureInfo.CurrentCulture = CultureInfo.InvariantCulture;
if (args is ["counts", ..])
{
    foreach (var variant in Variants.All)
    {
        foreach (var start in Starts.All)
        {
            var clock = Stopwatch.StartNew();
            var run = RacedRun.Scripted(variant, start.Settings, 60, []);
            Console.WriteLine($"{variant.Name,-28} {start.Name,-32} {clock.Elapsed.TotalMilliseconds / run.Steps.Sum(s => s.Count):0.00} ms/pass {string.Join(' ', run.Steps.Select(s => s.Count))}");
        }
    }
    return 0;
}
return 1;
