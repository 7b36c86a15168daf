using System.Globalization;

namespace CouplingWatch.Cli.Rehearse;

/// <summary>One line on the error stream that says how many candidates are done; only where somebody watches.</summary>
internal sealed class RehearsalLine(string file, TextWriter errors) : IProgress<double>, IDisposable
{
    private readonly bool wanted = ReferenceEquals(errors, Console.Error) && !Console.IsErrorRedirected;
    private double shown = -1;

    public void Report(double value)
    {
        if (!wanted || value - shown < 0.02) return;
        shown = value;
        errors.Write(string.Create(CultureInfo.InvariantCulture, $"\r{file}: {value:P0} of the candidates"));
    }

    public void End()
    {
        if (shown >= 0) errors.WriteLine();
        shown = -1;
    }

    public void Dispose() => End();
}
