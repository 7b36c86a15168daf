using System.CommandLine;
using CouplingWatch.Client;

namespace CouplingWatch.Cli.Sending;

/// <summary>The words that the commands which talk to a server share.</summary>
internal static class SendingWords
{
    public static Option<Uri> Server() => new("--server")
    {
        Description = "Address of the server.",
        DefaultValueFactory = _ => new Uri("http://127.0.0.1:5000"),
        CustomParser = result =>
        {
            if (Uri.TryCreate(result.Tokens[0].Value, UriKind.Absolute, out var address) && address.Scheme is "http" or "https") return address;
            result.AddError($"--server {result.Tokens[0].Value} is no http address.");
            return null;
        },
    };

    public static Option<string?> Run() => new("--run") { Description = "Name of the run; the file's name without .ndjson when left out." };

    /// <summary>The name given, or the file's own.</summary>
    public static string Name(string? run, FileInfo file) => run ?? Path.GetFileNameWithoutExtension(file.Name);

    /// <summary>Says what is wrong with a name; null when nothing is.</summary>
    public static string? Refuse(string run) => RunName.IsAllowed(run) ? null : $"\"{run}\" is no name of a run: 1–64 of a-z0-9-_. beginning with a letter or digit; name one with --run.";
}
