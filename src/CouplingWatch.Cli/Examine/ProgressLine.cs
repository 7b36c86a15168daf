using System.Globalization;
using CouplingWatch.Recordings;

namespace CouplingWatch.Cli.Examine;

/// <summary>One line on the error stream that says how far reading is; only for files long enough that one would wonder.</summary>
internal sealed class ProgressLine(FileInfo file, TextWriter errors) : IProgress<RecordingProgress>, IDisposable
{
    /// <summary>Shorter files show nothing.</summary>
    public const long LeastBytes = 32L * 1024 * 1024;

    private readonly bool wanted = file.Exists && file.Length >= LeastBytes;
    private bool shown;

    public void Report(RecordingProgress value)
    {
        if (!wanted) return;
        shown = true;
        errors.Write(string.Create(CultureInfo.InvariantCulture, $"\r{file.Name}: {value.Share:P0}, {value.Lines:N0} records"));
    }

    public void Dispose()
    {
        if (shown) errors.WriteLine();
    }
}
