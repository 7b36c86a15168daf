using System.Globalization;
using CouplingWatch.Client;

namespace CoupledRuns;

/// <summary>Runs one case from the command line: opens the stream, iterates, says on the console how it ended.</summary>
public static class SampleProgram
{
    /// <returns>0 when the run finished or was stopped, 1 when it diverged, 2 when the command line is wrong.</returns>
    public static async Task<int> RunAsync(string[] args, string prefix, IReadOnlyDictionary<string, string> cases, Func<string, (ICoupledProblem Problem, RunPlan Plan)> make)
    {
        ArgumentNullException.ThrowIfNull(make);
        if (SampleOptions.Parse(args, prefix, cases, out var trouble) is not { } options)
        {
            await Console.Error.WriteLineAsync(trouble);
            return 2;
        }
        var (problem, plan) = make(options.Case);
        plan = plan with { Pace = options.Pace, Steps = options.Steps };
        using var stop = new CancellationTokenSource();
        Console.CancelKeyPress += (_, e) =>
        {
            e.Cancel = true;
            stop.Cancel();
        };
        RunSender sender;
        try
        {
            sender = RunSender.Start(options.Server, options.Run, CoupledRun.Open(problem, plan, TimeProvider.System.GetUtcNow()), new RunSenderOptions { Log = Console.Error.WriteLine });
        }
        catch (Exception e) when (e is ArgumentException or IOException)
        {
            await Console.Error.WriteLineAsync(e.Message);
            return 2;
        }
        await using (sender)
        {
            Console.WriteLine($"{plan.Title}: run {options.Run} → {options.Server?.ToString() ?? sender.FileName}");
            var run = new CoupledRun(problem, plan, new SenderLink(sender), TimeProvider.System);
            var outcome = await run.RunAsync(stop.Token);
            var mean = run.Counts.Count == 0 ? 0 : run.Counts.Average();
            Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"{outcome.ToString().ToLowerInvariant()} after {run.Counts.Count} steps, {mean:F2} iterations a step"));
            return outcome == CouplingWatch.Records.CloseOutcome.Diverged ? 1 : 0;
        }
    }
}
