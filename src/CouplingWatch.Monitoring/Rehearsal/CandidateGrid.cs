using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Rehearsal;

/// <summary>The settings a rehearsal searches.</summary>
public static class CandidateGrid
{
    private static readonly int[] Histories = [0, 1, 2, 4, 8, 12];
    private static readonly int[] Orders = [0, 1, 2];

    /// <summary>
    /// History 0, 1, 2, 4, 8, 12, start order 0, 1, 2, both filter rules with ε from 1e-8 to 1e-1 by decades; never ε below what suits the
    /// declared noise unless the run uses the same rule with as small an ε already. Complete settings; the ones in use are not among them.
    /// </summary>
    /// <param name="noise">Largest declared solver noise; null when none is declared.</param>
    public static IReadOnlyList<CouplingSettings> For(CouplingSettings inUse, double? noise)
    {
        ArgumentNullException.ThrowIfNull(inUse);
        var candidates = new List<CouplingSettings>();
        foreach (var order in Orders)
            foreach (var history in Histories)
                foreach (var rule in new[] { FilterRule.OwnNorm, FilterRule.PivotRatio })
                    for (var decade = -8; decade <= -1; decade++)
                    {
                        var threshold = double.Parse($"1e{decade}", System.Globalization.CultureInfo.InvariantCulture);
                        var inHand = inUse.FilterRule == rule && inUse.FilterThreshold <= threshold;
                        if (threshold < AdvisedThreshold.Of(noise, rule) * (1 - 1e-9) && !inHand) continue;
                        var candidate = inUse with
                        {
                            Method = inUse.Method is CouplingMethod.Fixed or CouplingMethod.Aitken or null ? CouplingMethod.IqnIls : inUse.Method,
                            HistorySteps = history,
                            PredictorOrder = order,
                            FilterRule = rule,
                            FilterThreshold = threshold,
                        };
                        if (!Race.SettingsDifference.AreSame(inUse, candidate)) candidates.Add(candidate);
                    }
        return candidates;
    }
}
