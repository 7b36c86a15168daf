using System.CommandLine;
using System.Text.Json;
using System.Text.Json.Nodes;
using CouplingWatch.Monitoring;
using CouplingWatch.Monitoring.Rehearsal;
using CouplingWatch.Recordings;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Cli.Rehearse;

/// <summary><c>rehearse FILE…</c>: replays recorded steps under other settings. Declining is no error: it is said in the answer.</summary>
internal static class RehearseCommand
{
    public static Command Create()
    {
        var files = new Argument<FileInfo[]>("FILE") { Description = "Recordings (NDJSON) with vectors or sketches, one or more.", Arity = ArgumentArity.OneOrMore };
        var until = new Option<int?>("--until") { Description = "Only steps up to this one." };
        var candidates = new Option<FileInfo?>("--candidates") { Description = "A JSON list of settings, each only what differs from the settings in use; without it the usual grid is searched." };
        var json = new Option<bool>("--json") { Description = "One JSON object a file, one a line, instead of a page." };
        var command = new Command("rehearse", "Replays recorded steps under other settings: calibration first, then iterations a step of each candidate. It proposes; a race decides.") { files, until, candidates, json };
        command.SetAction((parsed, cancel) => RunAsync(parsed.GetValue(files)!, parsed.GetValue(until), parsed.GetValue(candidates), parsed.GetValue(json), Console.Out, Console.Error, cancel));
        return command;
    }

    internal static async Task<int> RunAsync(IReadOnlyList<FileInfo> files, int? until, FileInfo? candidates, bool json, TextWriter output, TextWriter errors, CancellationToken cancel)
    {
        CouplingSettings[]? asked = null;
        try
        {
            if (candidates is not null)
                asked = JsonSerializer.Deserialize<CouplingSettings[]>(await File.ReadAllTextAsync(candidates.FullName, cancel), WireJson.Options) ?? throw new JsonException("a list of settings is expected, not null");
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException or JsonException)
        {
            await errors.WriteLineAsync($"--candidates {candidates!.Name}: {e.Message}");
            return ExitCodes.Unreadable;
        }
        var exit = ExitCodes.Ok;
        foreach (var file in files)
        {
            try
            {
                if (await ReadAsync(file, until, errors, cancel) is not var (tape, circumstances))
                {
                    exit = ExitCodes.Unreadable;
                    continue;
                }
                using var progress = new RehearsalLine(file.Name, errors);
                var view = SettingsRehearsal.Prepare(tape, circumstances, cancel).Run(asked, progress, cancel);
                progress.End();
                if (json) await output.WriteLineAsync(Json(file, view));
                else await output.WriteAsync(RehearsalPage.Write(file.ToString(), tape.Settings, view));
            }
            catch (Exception e) when (e is IOException or UnauthorizedAccessException)
            {
                await errors.WriteLineAsync($"{file.Name}: {e.Message}");
                exit = ExitCodes.Unreadable;
            }
        }
        return exit;
    }

    /// <summary>The recorded steps, and what the checks said of them; null when the file is no residual stream.</summary>
    private static async Task<(RehearsalTape, RehearsalCircumstances)?> ReadAsync(FileInfo file, int? until, TextWriter errors, CancellationToken cancel)
    {
        var tape = new RehearsalTape();
        var monitor = new RunMonitor(Path.GetFileNameWithoutExtension(file.Name));
        await foreach (var item in RecordingFile.ReadAsync(file.FullName, null, cancel))
        {
            if (item.Problem is { } problem)
            {
                await errors.WriteLineAsync($"{file.Name}: {problem.Sentence}");
                return null;
            }
            if (item.Record is not { } record) continue;
            if (record is IterationRecord iteration && iteration.Step > until) break;
            tape.Observe(record);
            monitor.Observe(record, item.Received);
        }
        return (tape, RehearsalCircumstances.From(monitor.Alerts));
    }

    private static string Json(FileInfo file, RehearsalView view)
    {
        var body = JsonSerializer.SerializeToNode(view, WireJson.Options)!.AsObject();
        var all = new JsonObject { ["file"] = file.ToString() };
        foreach (var (name, value) in body) all[name] = value?.DeepClone();
        if (view.Proposal is null) all["proposal"] = null;
        return all.ToJsonString(WireJson.Options);
    }
}
