using System.CommandLine;
using System.Globalization;
using CouplingWatch.Monitoring;
using CouplingWatch.Recordings;
using CouplingWatch.Records;

namespace CouplingWatch.Cli.Check;

/// <summary><c>check FILE|URL</c>: says before a run starts whether it will be understood, from the first records it would send.</summary>
internal static class CheckCommand
{
    public static Command Create()
    {
        var what = new Argument<string>("FILE|URL") { Description = "The first records of a run (open, and the iterations of a step or more), or the address of a server." };
        var run = new Option<string?>("--run") { Description = "With an address: the name whose freedom is looked up." };
        var command = new Command("check", "Says whether a stream will be understood (the level reached, which checks are off, what to send for them), or whether a server will take it.") { what, run };
        command.SetAction((parsed, cancel) => Uri.TryCreate(parsed.GetValue(what), UriKind.Absolute, out var server) && server.Scheme is "http" or "https"
            ? ServerCheck.RunAsync(server, parsed.GetValue(run), null, Console.Out, cancel)
            : RunAsync(new FileInfo(parsed.GetValue(what)!), Console.Out, Console.Error, cancel));
        return command;
    }

    internal static async Task<int> RunAsync(FileInfo file, TextWriter output, TextWriter errors, CancellationToken cancel)
    {
        var monitor = new RunMonitor(Path.GetFileNameWithoutExtension(file.Name));
        long records = 0;
        var problems = 0;
        try
        {
            await foreach (var item in RecordingFile.ReadAsync(file.FullName, cancel: cancel))
            {
                if (item.Note is { } note) await output.WriteLineAsync($"line {item.Line}: {note.Text}");
                if (item.Problem is { } problem)
                {
                    problems++;
                    await output.WriteLineAsync(problem.Sentence);
                }
                if (item.Record is not { } record) continue;
                records++;
                if (record is UnknownRecord unknown) await output.WriteLineAsync($"line {item.Line}: records of the kind “{unknown.KindSent}” are kept and ignored");
                monitor.Observe(record, item.Received);
            }
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException)
        {
            await errors.WriteLineAsync($"{file.Name}: {e.Message}");
            return ExitCodes.Unreadable;
        }
        if (monitor.Open is null)
        {
            await output.WriteLineAsync("No open record was found: a stream begins with one.");
            return ExitCodes.Unreadable;
        }
        var summary = monitor.Summary();
        await output.WriteLineAsync(string.Create(CultureInfo.InvariantCulture, $"{records:N0} records understood, {problems:N0} refused. Level {summary.Level} of 3 reached."));
        await output.WriteLineAsync(monitor.Open.Adjustable.IsEmpty
            ? "Nothing is declared adjustable: advice can be given, but every change needs a restart."
            : "Adjustable in flight: " + string.Join(", ", monitor.Open.Adjustable.Ranges.Keys.Concat(monitor.Open.Adjustable.Choices.Keys).Concat(monitor.Open.Adjustable.Commands)) + ".");
        await output.WriteLineAsync(monitor.NotJudged.Count == 0 ? "Every check has what it needs." : "Off with what is sent:");
        foreach (var lack in monitor.NotJudged) await output.WriteLineAsync($"  {lack.Check}: {lack.Why}; send {lack.Send}");
        return problems > 0 ? ExitCodes.Unreadable : ExitCodes.Ok;
    }
}
