using System.CommandLine;
using CouplingWatch.Client;
using CouplingWatch.Records;

namespace CouplingWatch.Cli.Sending;

/// <summary><c>close RUN --outcome aborted</c>: says that a run has ended, for the exit trap of a job script.</summary>
internal static class CloseCommand
{
    public static Command Create()
    {
        var run = new Argument<string>("RUN") { Description = "Name of the run." };
        var server = SendingWords.Server();
        var outcome = new Option<CloseOutcome>("--outcome") { Description = "finished, aborted, diverged or stopped.", DefaultValueFactory = _ => CloseOutcome.Aborted };
        var reason = new Option<string?>("--reason") { Description = "Why, in a few words." };
        var command = new Command("close", "Says that a run has ended, when its code could not say so itself.") { run, server, outcome, reason };
        command.SetAction((parsed, cancel) => RunAsync(parsed.GetValue(run)!, parsed.GetValue(server)!, parsed.GetValue(outcome), parsed.GetValue(reason), null, Console.Out, Console.Error, cancel));
        return command;
    }

    internal static async Task<int> RunAsync(string run, Uri server, CloseOutcome outcome, string? reason, RunSenderOptions? options, TextWriter output, TextWriter errors, CancellationToken cancel)
    {
        if (SendingWords.Refuse(run) is { } refusal)
        {
            await errors.WriteLineAsync(refusal);
            return ExitCodes.Unreadable;
        }
        if (await RunCloser.CloseAsync(server, run, outcome, reason, options, cancel) is { } why)
        {
            await errors.WriteLineAsync($"run {run} was not closed: {why}");
            return ExitCodes.Unreadable;
        }
        await output.WriteLineAsync($"run {run} is closed as {outcome.ToString().ToLowerInvariant()}");
        return ExitCodes.Ok;
    }
}
