using System.Text.Json.Nodes;

namespace CouplingWatch.Records;

/// <summary>The coupling settings of a run. Null means "not declared" in <c>open</c> and "unchanged" in a change.</summary>
public sealed record CouplingSettings
{
    public CouplingMethod? Method { get; init; }
    /// <summary>Relaxation of the first pass (every pass for <c>fixed</c>); dimensionless, above 0.</summary>
    public double? Relaxation { get; init; }
    /// <summary>How many earlier time steps lend their columns; 0 or more.</summary>
    public int? HistorySteps { get; init; }
    public FilterRule? FilterRule { get; init; }
    /// <summary>Dimensionless threshold ε of the filter, 0 ≤ ε &lt; 1.</summary>
    public double? FilterThreshold { get; init; }
    public int? IterationCap { get; init; }
    /// <summary>Order of the start extrapolation: 0 constant, 1 linear, 2 quadratic.</summary>
    public int? PredictorOrder { get; init; }
    /// <summary>Coupling tolerance, where the code lets it be changed as one number.</summary>
    public double? Tolerance { get; init; }
    /// <summary>Which surrogate an iqn-ilsm code uses, by its own name.</summary>
    public string? Surrogate { get; init; }
    /// <summary>The code's own further settings, kept as sent.</summary>
    public JsonObject? Own { get; init; }

    /// <summary>These settings with every member that <paramref name="change"/> states replaced.</summary>
    public CouplingSettings With(CouplingSettings change)
    {
        ArgumentNullException.ThrowIfNull(change);
        return new CouplingSettings
        {
            Method = change.Method ?? Method,
            Relaxation = change.Relaxation ?? Relaxation,
            HistorySteps = change.HistorySteps ?? HistorySteps,
            FilterRule = change.FilterRule ?? FilterRule,
            FilterThreshold = change.FilterThreshold ?? FilterThreshold,
            IterationCap = change.IterationCap ?? IterationCap,
            PredictorOrder = change.PredictorOrder ?? PredictorOrder,
            Tolerance = change.Tolerance ?? Tolerance,
            Surrogate = change.Surrogate ?? Surrogate,
            Own = change.Own ?? Own,
        };
    }
}

public enum CouplingMethod { Fixed, Aitken, IqnIls, IqnIlsm, Mvqn, Other }

public enum FilterRule { PivotRatio, OwnNorm, None, Other }

/// <summary>What the code lets be changed in flight. A name that stands in neither map is never published to it.</summary>
public sealed record AdjustableSettings
{
    /// <summary>Closed ranges by setting name (camelCase, as in the stream).</summary>
    public IReadOnlyDictionary<string, NumberRange> Ranges { get; init; } = new Dictionary<string, NumberRange>();
    /// <summary>Allowed values by setting name.</summary>
    public IReadOnlyDictionary<string, IReadOnlyList<string>> Choices { get; init; } = new Dictionary<string, IReadOnlyList<string>>();
    /// <summary>Commands the code takes: <c>dropHistory</c>, <c>stop</c>.</summary>
    public IReadOnlyList<string> Commands { get; init; } = [];

    public bool Allows(string setting) => Ranges.ContainsKey(setting) || Choices.ContainsKey(setting) || Commands.Contains(setting);

    public bool IsEmpty => Ranges.Count == 0 && Choices.Count == 0 && Commands.Count == 0;
}

public readonly record struct NumberRange(double Low, double High)
{
    public bool Contains(double value) => value >= Low && value <= High;
}
