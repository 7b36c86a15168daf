using System.CommandLine;
using System.Text.Json;
using CouplingWatch.Monitoring.Examining;
using CouplingWatch.Recordings;
using CouplingWatch.Wire;

namespace CouplingWatch.Cli.Examine;

/// <summary><c>examine FILE…</c>: the judgement of recorded streams, for a post-mortem and for the continuous integration of a coupled code.</summary>
internal static class ExamineCommand
{
    public static Command Create()
    {
        var files = new Argument<FileInfo[]>("FILE") { Description = "Recordings (NDJSON), one or more.", Arity = ArgumentArity.OneOrMore };
        var json = new Option<bool>("--json") { Description = "One JSON object a file, one a line, instead of a page." };
        var failOn = new Option<Severity?>("--fail-on") { Description = "Exit with 1 when an alert of this severity or a higher one was raised: note, warning or critical." };
        var baseline = new Option<FileInfo?>("--baseline") { Description = "An earlier output of --json: alerts of a check it has for the same file do not count for --fail-on." };
        var command = new Command("examine", "Judges recorded streams: verdict, what happened when, what to change, what could not be judged.") { files, json, failOn, baseline };
        command.SetAction((parsed, cancel) => RunAsync(parsed.GetValue(files)!, parsed.GetValue(json), parsed.GetValue(failOn), parsed.GetValue(baseline), Console.Out, Console.Error, cancel));
        return command;
    }

    internal static async Task<int> RunAsync(IReadOnlyList<FileInfo> files, bool json, Severity? failOn, FileInfo? baseline, TextWriter output, TextWriter errors, CancellationToken cancel)
    {
        Baseline known;
        try
        {
            known = baseline is null ? Baseline.None : await Baseline.ReadAsync(baseline.FullName, cancel);
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException or JsonException)
        {
            await errors.WriteLineAsync($"--baseline {baseline!.Name}: {e.Message}");
            return ExitCodes.Unreadable;
        }
        var exit = ExitCodes.Ok;
        foreach (var file in files)
        {
            Examination examination;
            try
            {
                examination = await ExamineAsync(file, errors, cancel);
            }
            catch (Exception e) when (e is IOException or UnauthorizedAccessException)
            {
                await errors.WriteLineAsync($"{file.Name}: {e.Message}");
                exit = ExitCodes.Unreadable;
                continue;
            }
            if (json) await output.WriteLineAsync(JsonSerializer.Serialize(examination, WireJson.Options));
            else await output.WriteAsync(ExaminationPage.Write(examination));
            if (examination.Problem is { } problem)
            {
                await errors.WriteLineAsync($"{file.Name}: {problem.Sentence}");
                exit = ExitCodes.Unreadable;
            }
            else if (exit == ExitCodes.Ok && failOn is { } least && examination.Alerts.Any(a => a.Severity >= least && !known.Has(file.Name, a.Check))) exit = ExitCodes.Found;
        }
        return exit;
    }

    private static async Task<Examination> ExamineAsync(FileInfo file, TextWriter errors, CancellationToken cancel)
    {
        var name = Path.GetFileNameWithoutExtension(file.Name);
        using var progress = new ProgressLine(file, errors);
        return await Examiner.ExamineAsync(file.ToString(), name, RecordingFile.ReadAsync(file.FullName, progress, cancel));
    }
}
