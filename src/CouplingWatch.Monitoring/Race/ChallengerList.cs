using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Race;

/// <summary>The challengers of a race: people's own and the best of a rehearsal or of a sister run first, then a fixed list of moves that often help.</summary>
public static class ChallengerList
{
    /// <summary>Proposes at most <paramref name="most"/> challengers, none twice, none equal to the settings in use, only what the run declared adjustable.</summary>
    /// <param name="inUse">The complete settings in force.</param>
    /// <param name="first">Candidates that come before the rule's own, in order; complete settings.</param>
    /// <param name="noise">Largest declared noise of the solvers; null when none is declared.</param>
    /// <param name="byRule">False: only <paramref name="first"/>.</param>
    public static ChallengerChoice Propose(CouplingSettings inUse, AdjustableSettings adjustable, double? noise, IReadOnlyList<RaceChallenger>? first = null, bool byRule = true, int most = 6)
    {
        ArgumentNullException.ThrowIfNull(inUse);
        ArgumentNullException.ThrowIfNull(adjustable);
        ArgumentOutOfRangeException.ThrowIfLessThan(most, 1);
        var chosen = new List<RaceChallenger>();
        var refused = new List<RefusedChallenger>();
        IEnumerable<RaceChallenger> candidates = first ?? [];
        if (byRule) candidates = candidates.Concat(ByRule(inUse, noise).Select(s => new RaceChallenger(s, "rule")));
        foreach (var candidate in candidates)
        {
            if (Refusal(candidate) is { } why) refused.Add(new RefusedChallenger(candidate, why));
            else chosen.Add(candidate);
        }
        return new ChallengerChoice(chosen, refused);

        string? Refusal(RaceChallenger candidate)
        {
            if (SettingsDifference.AreSame(inUse, candidate.Settings)) return "it equals the settings in use";
            if (SettingsDifference.Refusal(inUse, candidate.Settings, adjustable) is { } why) return why;
            if (SettingsDifference.Between(inUse, candidate.Settings).Any(c => c.Alters == "result")) return "it alters the result, and a race compares only cost";
            if (chosen.Any(c => SettingsDifference.AreSame(c.Settings, candidate.Settings))) return "it stands in the list already";
            return chosen.Count >= most ? $"a race takes at most {most}" : null;
        }
    }

    /// <summary>The written list, in its order, before anything is left out.</summary>
    public static IReadOnlyList<CouplingSettings> ByRule(CouplingSettings inUse, double? noise)
    {
        ArgumentNullException.ThrowIfNull(inUse);
        var own = NoiseThreshold.OwnNorm(noise);
        var pivot = NoiseThreshold.PivotRatio(noise);
        switch (inUse.Method)
        {
            case CouplingMethod.Fixed or CouplingMethod.Aitken or CouplingMethod.Mvqn:
                return [QuasiNewton(4), QuasiNewton(8), QuasiNewton(1)];
            case CouplingMethod.Other:
            case null when inUse.HistorySteps is null && inUse.FilterThreshold is null:
                return [];
        }
        var history = inUse.HistorySteps ?? 0;
        var larger = own >= 1e-3 ? 1e-1 : 1e-3;
        return
        [
            Filter(FilterRule.OwnNorm, own),
            Filter(FilterRule.OwnNorm, own) with { HistorySteps = history == 4 ? 8 : 4 },
            inUse with { HistorySteps = history == 0 ? 2 : history / 2 },
            inUse with { HistorySteps = history == 0 ? 8 : history * 2 },
            Filter(FilterRule.OwnNorm, larger),
            Filter(FilterRule.PivotRatio, pivot),
        ];

        CouplingSettings Filter(FilterRule rule, double threshold) => inUse with { FilterRule = rule, FilterThreshold = threshold };

        CouplingSettings QuasiNewton(int steps) => Filter(FilterRule.OwnNorm, own) with { Method = CouplingMethod.IqnIls, HistorySteps = steps };
    }
}

/// <param name="Challengers">In the order they take part.</param>
/// <param name="Refused">Candidates left out, each with its reason.</param>
public sealed record ChallengerChoice(IReadOnlyList<RaceChallenger> Challengers, IReadOnlyList<RefusedChallenger> Refused);

public sealed record RefusedChallenger(RaceChallenger Challenger, string Why);

/// <summary>ε₀: the filter threshold that fits a declared solver noise τ.</summary>
public static class NoiseThreshold
{
    /// <summary>min(100 τ, 1e-2); 1e-4 without declared noise.</summary>
    public static double OwnNorm(double? noise) => noise is { } tau ? Math.Min(100 * Valid(tau), 1e-2) : 1e-4;

    /// <summary>min(10 τ, 1e-4); 1e-6 without declared noise.</summary>
    public static double PivotRatio(double? noise) => noise is { } tau ? Math.Min(10 * Valid(tau), 1e-4) : 1e-6;

    private static double Valid(double noise) => noise >= 0 && double.IsFinite(noise)
        ? noise
        : throw new ArgumentOutOfRangeException(nameof(noise), noise, "a declared noise is finite and not negative");
}
