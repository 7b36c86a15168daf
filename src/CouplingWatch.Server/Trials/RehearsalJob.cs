using CouplingWatch.Wire;

namespace CouplingWatch.Server.Trials;

/// <summary>One rehearsal from asked for to done. Safe for concurrent use.</summary>
internal sealed class RehearsalJob(string id, string run) : IProgress<double>
{
    private readonly CancellationTokenSource stop = new();
    private volatile RehearsalStatus status = new(id, run, "running", 0, null, null);

    public string Id => id;

    public string Run => run;

    public RehearsalStatus Status => status;

    public CancellationToken Cancelled => stop.Token;

    /// <summary>Ends when the rehearsal has ended, however it did.</summary>
    public Task Work { get; set; } = Task.CompletedTask;

    public void Report(double value) => status = status with { Progress = value };

    /// <param name="view">Null when it was cancelled.</param>
    public void Finish(RehearsalView? view) => status = view is null ? status with { State = "cancelled" } : status with { State = "done", Progress = 1, Result = view };

    public void Fail(string why) => status = status with { State = "failed", Problem = why };

    public void Cancel() => stop.Cancel();
}

/// <param name="State">running, done, cancelled, failed.</param>
/// <param name="Progress">Share of the candidates replayed, 0…1.</param>
internal sealed record RehearsalStatus(string Id, string Run, string State, double Progress, RehearsalView? Result, string? Problem);

/// <summary>Body of <c>POST …/rehearsals</c>.</summary>
/// <param name="Candidates">Each only what differs from the settings in use; null or empty: searched.</param>
internal sealed record RehearsalRequest(IReadOnlyList<Records.CouplingSettings>? Candidates = null);
