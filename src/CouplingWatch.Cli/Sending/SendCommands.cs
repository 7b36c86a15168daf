using System.CommandLine;
using System.Globalization;
using CouplingWatch.Client;
using CouplingWatch.Client.Recordings;

namespace CouplingWatch.Cli.Sending;

/// <summary><c>send FILE</c> and <c>follow FILE</c>: bring the records of a file to a server, once or as they are appended.</summary>
internal static class SendCommands
{
    public static Command Send() => Create("send", "Sends the records of a file to a server. Sending again is harmless.", follow: false);

    public static Command Follow() => Create("follow", "Sends a file and what is appended to it, from a login node; settings come back as NAME.settings.json beside it.", follow: true);

    private static Command Create(string name, string description, bool follow)
    {
        var file = new Argument<FileInfo>("FILE") { Description = "Recording (NDJSON)." };
        var server = SendingWords.Server();
        var run = SendingWords.Run();
        var command = new Command(name, description) { file, server, run };
        command.SetAction((parsed, cancel) => RunAsync(parsed.GetValue(file)!, parsed.GetValue(server)!, parsed.GetValue(run), follow, null, Console.Out, Console.Error, cancel));
        return command;
    }

    internal static async Task<int> RunAsync(FileInfo file, Uri server, string? run, bool follow, RunSenderOptions? options, TextWriter output, TextWriter errors, CancellationToken cancel)
    {
        var name = SendingWords.Name(run, file);
        if (SendingWords.Refuse(name) is { } refusal)
        {
            await errors.WriteLineAsync(refusal);
            return ExitCodes.Unreadable;
        }
        options = (options ?? new RunSenderOptions()) with { Log = errors.WriteLine };
        SentRecording sent;
        try
        {
            sent = await (follow
                ? RecordingSender.FollowAsync(server, name, file.FullName, options, cancel)
                : RecordingSender.SendAsync(server, name, file.FullName, options, cancel: cancel));
        }
        catch (Exception thrown) when (thrown is IOException or UnauthorizedAccessException)
        {
            await errors.WriteLineAsync($"{file.Name}: {thrown.Message}");
            return ExitCodes.Unreadable;
        }
        await output.WriteLineAsync(string.Create(CultureInfo.InvariantCulture, $"{sent.Records:N0} records of run {sent.Run} delivered to {server}"));
        if (sent.Problem is not { } problem) return ExitCodes.Ok;
        await errors.WriteLineAsync($"{file.Name}: {problem}");
        return ExitCodes.Unreadable;
    }
}
