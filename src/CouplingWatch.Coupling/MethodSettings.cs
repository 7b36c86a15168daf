using CouplingWatch.Numerics.Secants;

namespace CouplingWatch.Coupling;

/// <summary>The published methods this library knows.</summary>
public enum MethodKind
{
    /// <summary>Fixed relaxation.</summary>
    Fixed,

    /// <summary>Aitken's dynamic relaxation.</summary>
    Aitken,

    /// <summary>Interface quasi-Newton with the inverse Jacobian from least squares.</summary>
    IqnIls,

    /// <summary>The same, completed by a surrogate outside the span of the secants.</summary>
    IqnIlsm,

    /// <summary>Multi-vector quasi-Newton in its linear-memory form.</summary>
    Mvqn,
}

/// <summary>Settings of a <see cref="SteppedCoupling"/>; they may change between steps.</summary>
public sealed record MethodSettings
{
    /// <summary>The method.</summary>
    public MethodKind Method { get; init; } = MethodKind.IqnIls;

    /// <summary>Relaxation of the first pass (of every pass for <see cref="MethodKind.Fixed"/>), finite, above 0.</summary>
    public double Relaxation { get; init; } = 0.1;

    /// <summary>How many earlier steps lend their columns, 0 or more.</summary>
    public int HistorySteps { get; init; }

    /// <summary>Rule by which columns are left out.</summary>
    public SecantFilter FilterRule { get; init; } = SecantFilter.OwnNorm;

    /// <summary>Threshold ε of the filter, 0 ≤ ε &lt; 1.</summary>
    public double FilterThreshold { get; init; } = 1e-4;

    /// <summary>Throws when a value lies outside its range; the message names value and range.</summary>
    public MethodSettings Checked()
    {
        if (!Enum.IsDefined(Method)) throw new ArgumentOutOfRangeException(nameof(Method), Method, "Unknown method.");
        if (!Enum.IsDefined(FilterRule)) throw new ArgumentOutOfRangeException(nameof(FilterRule), FilterRule, "Unknown filter rule.");
        if (!(Relaxation > 0) || !double.IsFinite(Relaxation))
            throw new ArgumentOutOfRangeException(nameof(Relaxation), Relaxation, "The relaxation is finite and above 0.");
        if (HistorySteps < 0) throw new ArgumentOutOfRangeException(nameof(HistorySteps), HistorySteps, "The history has 0 steps or more.");
        if (!(FilterThreshold is >= 0 and < 1))
            throw new ArgumentOutOfRangeException(nameof(FilterThreshold), FilterThreshold, "The filter threshold lies in 0 ≤ ε < 1.");
        return this;
    }
}
