using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Rehearsal;

/// <summary>What the checks said about the steps to be replayed: under some of it a replay foretells nothing.</summary>
/// <param name="Raised">Alerts, open or closed, with the steps they hold for.</param>
public sealed record RehearsalCircumstances(IReadOnlyList<RaisedCheck> Raised)
{
    public static RehearsalCircumstances None { get; } = new([]);

    public static RehearsalCircumstances From(IReadOnlyList<Alert> alerts)
    {
        ArgumentNullException.ThrowIfNull(alerts);
        return new([.. alerts.Select(a => new RaisedCheck(a.Check, a.Step, Math.Max(a.Step, a.LastStep)))]);
    }

    /// <summary>Why the window is unsuitable; null when it is not.</summary>
    internal string? Unsuitable(int fromStep, int toStep, int window)
    {
        foreach (var raised in Raised)
            if (raised.Check is "stale" or "drift" && raised.FromStep <= toStep && raised.ToStep >= fromStep)
                return $"the regime changed within the window ({raised.Check} in step {raised.FromStep})";
        var noisy = Enumerable.Range(fromStep, toStep - fromStep + 1).Count(s => Raised.Any(r => r.Check is "noise-floor" or "polluted" && r.FromStep <= s && s <= r.ToStep));
        return 2 * noisy > window ? $"{noisy} of the {window} steps of the window are marked by noise" : null;
    }
}

/// <param name="Check">Id of the check.</param>
public readonly record struct RaisedCheck(string Check, int FromStep, int ToStep);
