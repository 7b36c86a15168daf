using System.Text.Json;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Examine;

/// <summary>What the server said of a recording that was dropped: the verdict and the most telling lines, or why it could not be read.</summary>
public sealed record ExaminedFile
{
    public Verdict? Verdict { get; init; }
    public int Steps { get; init; }
    public long Iterations { get; init; }
    public IReadOnlyList<ExaminedAlert> Alerts { get; init; } = [];
    /// <summary>Alerts in all; the page is told of the first twenty.</summary>
    public int AlertCount { get; init; }
    public IReadOnlyList<string> Advice { get; init; } = [];
    public IReadOnlyList<NotJudged> NotJudged { get; init; } = [];
    /// <summary>A sentence when it was not judged: which line, what was expected.</summary>
    public string? Problem { get; init; }

    /// <summary>Reads what the browser's side hands over. A text that is none of it is itself a problem, never an exception.</summary>
    public static ExaminedFile Read(string json)
    {
        ArgumentNullException.ThrowIfNull(json);
        try
        {
            return JsonSerializer.Deserialize<ExaminedFile>(json, WireJson.Options) is { } file && (file.Verdict is not null || file.Problem is not null)
                ? file
                : new ExaminedFile { Problem = "The server’s answer could not be read." };
        }
        catch (JsonException)
        {
            return new ExaminedFile { Problem = "The server’s answer could not be read." };
        }
    }
}

/// <summary>An alert the recording would have raised.</summary>
public sealed record ExaminedAlert(string Check, Severity Severity, int Step, int Iteration, string Text);
