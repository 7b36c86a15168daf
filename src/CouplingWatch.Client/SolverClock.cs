namespace CouplingWatch.Client;

/// <summary>Which solver the run is inside of, and since when.</summary>
internal sealed class SolverClock(TimeProvider time)
{
    private readonly Lock gate = new();
    private (string? Solver, long Since) now;

    public (string? Solver, long Since) Now
    {
        get { lock (gate) return now; }
    }

    public void Enter(string? solver)
    {
        lock (gate) now = (solver, time.GetTimestamp());
    }
}
