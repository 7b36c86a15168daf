using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Basis;

/// <summary>What the secant update after one iteration rests on: which columns, what it promises, and what became of the promise.</summary>
internal sealed class UpdateFacts
{
    public required int Iteration { get; init; }

    /// <summary>vectors, sketch or reported.</summary>
    public required string Source { get; init; }

    /// <summary>Norm of the group's residual at this iteration.</summary>
    public required double Norm { get; init; }

    public required FilterRule Rule { get; init; }

    public required double Threshold { get; init; }

    /// <summary>Columns there were, kept and left out.</summary>
    public int All { get; init; }

    public int Kept { get; init; }

    public int Left { get; init; }

    /// <summary>Columns born in this step.</summary>
    public int Live { get; init; }

    public int LiveLeft { get; init; }

    /// <summary>Columns of earlier steps that are in use.</summary>
    public int HistoryKept { get; init; }

    /// <summary>The column [s, k − 1] is not among those in use.</summary>
    public bool NewestLiveLeft { get; init; }

    /// <summary>c: share of the residual the columns in use do not claim to remove; NaN when it is not known.</summary>
    public double Uncovered { get; init; } = double.NaN;

    /// <summary>Shares of ‖r‖² on the live columns, and on what the reused ones add; NaN without vectors.</summary>
    public double LiveShare { get; init; } = double.NaN;

    public double HistoryShare { get; init; } = double.NaN;

    /// <summary>‖α‖; NaN when not known.</summary>
    public double AlphaNorm { get; init; } = double.NaN;

    /// <summary>Share the surrogate says it covered; NaN without one.</summary>
    public double Surrogate { get; init; } = double.NaN;

    /// <summary>The update was made with secant columns (not by relaxation).</summary>
    public bool Made { get; init; }

    /// <summary>‖r_{k+1}‖/‖r_k‖; NaN until the next iteration.</summary>
    public double Came { get; set; } = double.NaN;

    /// <summary>It claimed to remove more than this share was left …</summary>
    public bool Promises(double promisedBelow) => Made && Uncovered < promisedBelow;

    /// <summary>… and more than <paramref name="keptBelow"/> of the residual was still there.</summary>
    public bool Broken(double promisedBelow, double keptBelow) => Promises(promisedBelow) && Came > keptBelow;
}
