using CouplingWatch.Monitoring.Statistics;

namespace CouplingWatch.Monitoring.State;

/// <summary>The step (or the attempt at it) in progress, or the last one once it is closed.</summary>
internal sealed class StepState
{
    /// <summary>Longest window a check looks back on within a step.</summary>
    public const int Longest = 16;

    /// <summary>The window of <c>slow</c>, <c>stall</c> and <c>noise-floor</c>.</summary>
    public const int ProgressWindow = 8;

    private readonly Window lowestBefore = new(ProgressWindow + 1);

    public int Step { get; private set; } = -1;

    public int Attempt { get; private set; }

    /// <summary>Counts steps and attempts begun in this run; names this one.</summary>
    public long Ordinal { get; private set; }

    /// <summary>True from the first iteration until the verdict.</summary>
    public bool InProgress { get; set; }

    /// <summary>Index of the latest iteration as sent; −1 before the first.</summary>
    public int Iteration { get; private set; } = -1;

    /// <summary>Iterations received of this step.</summary>
    public int Received { get; private set; }

    public long FirstSeq { get; private set; }

    public double? Time { get; set; }

    public double? TimeStep { get; set; }

    /// <summary>z of the latest iterations.</summary>
    public Window Z { get; } = new(Longest);

    /// <summary>y of the latest iterations; not filled while it is unknown.</summary>
    public Window Needs { get; } = new(Longest);

    /// <summary>Cosine of the latest residuals with the ones before them; empty without vectors.</summary>
    public Window Cosines { get; } = new(Longest);

    public double FirstZ { get; private set; }

    public double LowestZ { get; private set; }

    /// <summary>Place (0, 1, …, by arrival) of the lowest z.</summary>
    public int LowestAt { get; private set; }

    public double HighestZ { get; private set; }

    /// <summary>Smallest z of the places up to the latest one but eight; +∞ with fewer than nine.</summary>
    public double LowestBeforeWindow => lowestBefore.Count > ProgressWindow ? lowestBefore[ProgressWindow] : double.PositiveInfinity;

    /// <summary>z₁ − z₀; NaN before the second iteration.</summary>
    public double FirstIncrement { get; private set; }

    /// <summary>A residual of this step was not finite.</summary>
    public bool HasNotFinite { get; private set; }

    /// <summary>Records of this step are missing: it lends no columns and no path.</summary>
    public bool Incomplete { get; set; }

    /// <summary>The need of every iteration so far was known.</summary>
    public bool NeedsKnown { get; private set; }

    public double? Need { get; private set; }

    public bool Done { get; private set; }

    /// <summary>Place of the latest iteration by arrival: k of the rules when nothing is missing.</summary>
    public int Last => Received - 1;

    public void Begin(int step, int attempt, long seq)
    {
        Step = step;
        Attempt = attempt;
        Ordinal++;
        InProgress = true;
        Iteration = -1;
        Received = 0;
        FirstSeq = seq;
        Time = TimeStep = null;
        Z.Clear();
        Needs.Clear();
        Cosines.Clear();
        lowestBefore.Clear();
        FirstZ = FirstIncrement = double.NaN;
        LowestZ = double.PositiveInfinity;
        HighestZ = double.NegativeInfinity;
        LowestAt = 0;
        HasNotFinite = Incomplete = Done = false;
        NeedsKnown = true;
        Need = null;
    }

    public void Add(int iteration, double norm, double? need, bool done, bool notFinite)
    {
        if (iteration != Iteration + 1) Incomplete = true;
        Iteration = iteration;
        var place = Received++;
        Need = need;
        Done = done;
        HasNotFinite |= notFinite;
        NeedsKnown &= need is not null;
        var z = Decades.Log(norm);
        Z.Add(z);
        if (need is { } y) Needs.Add(y);
        if (place == 0) FirstZ = z;
        if (place == 1) FirstIncrement = z - FirstZ;
        if (z < LowestZ)
        {
            LowestZ = z;
            LowestAt = place;
        }
        HighestZ = Math.Max(HighestZ, z);
        lowestBefore.Add(LowestZ);
    }

    /// <summary>Share of falling ones among the last <paramref name="n"/> increments of z; NaN with fewer.</summary>
    public double FallingShare(int n)
    {
        if (Z.Count < n + 1) return double.NaN;
        var falling = 0;
        for (var i = 0; i < n; i++)
            if (Z[i] < Z[i + 1]) falling++;
        return falling / (double)n;
    }

    /// <summary>How many decades the lowest z of the last eight iterations lies below the lowest before them; NaN with fewer than nine.</summary>
    public double Improvement
    {
        get
        {
            if (Z.Count <= ProgressWindow) return double.NaN;
            var lowest = double.PositiveInfinity;
            for (var i = 0; i < ProgressWindow; i++) lowest = Math.Min(lowest, Z[i]);
            return LowestBeforeWindow - lowest;
        }
    }

    /// <summary>At least 90 % of the last eight cosines lie below −0.5; false without vectors.</summary>
    public bool Alternating
    {
        get
        {
            if (Cosines.Count < ProgressWindow) return false;
            var opposite = 0;
            for (var i = 0; i < ProgressWindow; i++)
                if (Cosines[i] < -0.5) opposite++;
            return opposite >= 0.9 * ProgressWindow;
        }
    }
}
