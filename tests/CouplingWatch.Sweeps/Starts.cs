using CouplingWatch.Records;

namespace CouplingWatch.Sweeps;

/// <param name="Name">Short, for the table.</param>
internal sealed record Start(string Name, CouplingSettings Settings);

/// <summary>The settings a run begins with, good and bad.</summary>
internal static class Starts
{
    public static IReadOnlyList<Start> All { get; } =
    [
        new("starved: pivot-ratio 1e-2, q 4", QuasiNewton(4, FilterRule.PivotRatio, 1e-2)),
        new("polluted: own-norm 1e-11, q 2", QuasiNewton(2, FilterRule.OwnNorm, 1e-11)),
        new("no history: own-norm 1e-4, q 0", QuasiNewton(0, FilterRule.OwnNorm, 1e-4)),
        new("usual: own-norm 1e-4, q 4", QuasiNewton(4, FilterRule.OwnNorm, 1e-4)),
        new("long: own-norm 1e-6, q 12", QuasiNewton(12, FilterRule.OwnNorm, 1e-6)),
        new("coarse: own-norm 1e-1, q 4", QuasiNewton(4, FilterRule.OwnNorm, 1e-1)),
        new("pivot-ratio 1e-6, q 1", QuasiNewton(1, FilterRule.PivotRatio, 1e-6)),
        new("aitken", QuasiNewton(0, FilterRule.OwnNorm, 1e-4) with { Method = CouplingMethod.Aitken }),
    ];

    /// <summary>What the swept runs let be changed in flight.</summary>
    public static AdjustableSettings Adjustable { get; } = new()
    {
        Ranges = new Dictionary<string, NumberRange> { ["relaxation"] = new(0.01, 1), ["historySteps"] = new(0, 40), ["filterThreshold"] = new(1e-12, 0.1), ["predictorOrder"] = new(0, 2) },
        Choices = new Dictionary<string, IReadOnlyList<string>> { ["filterRule"] = ["own-norm", "pivot-ratio"], ["method"] = ["fixed", "aitken", "iqn-ils"] },
        Commands = ["dropHistory"],
    };

    private static CouplingSettings QuasiNewton(int history, FilterRule rule, double threshold) => new()
    {
        Method = CouplingMethod.IqnIls,
        Relaxation = 0.1,
        HistorySteps = history,
        FilterRule = rule,
        FilterThreshold = threshold,
        IterationCap = 40,
        PredictorOrder = 1,
    };
}
