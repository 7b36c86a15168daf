using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.State;

/// <summary>Wall seconds of the latest passes, by solver and as a whole.</summary>
internal sealed class SolverTimes
{
    public const int PassesKept = 50;
    public const double LeastHangSeconds = 600;
    public const double TimesTheLongest = 3;

    private readonly List<(string Solver, Window Seconds)> solvers = [];

    /// <summary>Seconds of the latest whole passes; the sum over the solvers where the pass itself was not sent.</summary>
    public Window Passes { get; } = new(PassesKept);

    /// <summary>All seconds of all passes so far.</summary>
    public double Total { get; private set; }

    public IReadOnlyList<(string Solver, Window Seconds)> Solvers => solvers;

    public void Observe(IterationRecord record, bool parallel)
    {
        var whole = 0.0;
        if (record.Seconds is { } seconds)
        {
            for (var i = 0; i < seconds.Count; i++)
            {
                var value = seconds.Values[i];
                if (!(value >= 0) || !double.IsFinite(value)) continue;
                WindowOf(seconds.Names[i]).Add(value);
                whole = parallel ? Math.Max(whole, value) : whole + value;
            }
        }
        if (record.PassSeconds is { } pass && pass >= 0 && double.IsFinite(pass)) whole = pass;
        else if (record.Seconds is null) return;
        Passes.Add(whole);
        Total += whole;
    }

    /// <summary>Seconds inside a solver from which on it counts as hanging: 10 minutes, or three times its longest of the latest 50 passes.</summary>
    public double HangLimit(string solver)
    {
        var longest = 0.0;
        foreach (var (name, seconds) in solvers)
            if (name == solver)
                for (var i = 0; i < seconds.Count; i++) longest = Math.Max(longest, seconds[i]);
        return Math.Max(LeastHangSeconds, TimesTheLongest * longest);
    }

    private Window WindowOf(string solver)
    {
        foreach (var (name, seconds) in solvers)
            if (ReferenceEquals(name, solver) || name == solver) return seconds;
        var added = new Window(PassesKept);
        solvers.Add((solver, added));
        return added;
    }
}
