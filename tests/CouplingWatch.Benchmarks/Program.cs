using System.Globalization;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;
using CouplingWatch.Benchmarks.Monitor;
using CouplingWatch.Benchmarks.Secants;
using CouplingWatch.Benchmarks.Timing;

// Usage: dotnet run -c Release --project tests/CouplingWatch.Benchmarks -- [filter]
// Runs every group whose name contains the filter. Figures that count are the ratios within one run.
CultureInfo.CurrentCulture = CultureInfo.InvariantCulture;
(string Name, Action<Table> Run)[] groups =
[
    ("append", AppendBenchmark.Run),
    ("small", SmallMatrixBenchmark.Run),
    ("monitor", MonitorBenchmark.Run),
];
string filter = args.Length > 0 ? args[0] : "";
Console.WriteLine($"{RuntimeInformation.ProcessArchitecture}, {Environment.ProcessorCount} processors, .NET {Environment.Version}, {(Vector512.IsHardwareAccelerated ? 512 : 256)}-bit vectors; {ThreadClock.Kind}, smallest of the repetitions.");
Console.WriteLine();
var table = new Table();
foreach (var (name, run) in groups)
    if (name.Contains(filter, StringComparison.OrdinalIgnoreCase)) run(table);
