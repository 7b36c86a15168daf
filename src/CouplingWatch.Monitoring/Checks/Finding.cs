using System.Text.Json.Nodes;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks;

/// <summary>A condition that holds at this record: what a check hands to the alerts.</summary>
/// <param name="Check">Stable id, one of <see cref="CheckIds"/>.</param>
/// <param name="Text">One sentence a tired engineer understands, with its numbers.</param>
/// <param name="Evidence">The numbers behind it, by name.</param>
/// <param name="Certain">True when it stands whatever becomes of the attempt (a residual that is not a number, a divergence, silence).</param>
internal sealed record Finding(string Check, Severity Severity, string Text, JsonObject Evidence, bool Certain = false)
{
    /// <summary>The numbers behind it; those that are none (NaN, infinite) are null.</summary>
    public JsonObject Evidence { get; } = Finite(Evidence);

    private static JsonObject Finite(JsonObject evidence)
    {
        foreach (var (name, value) in evidence.ToArray())
            if (value is JsonValue number && number.TryGetValue<double>(out var d) && !double.IsFinite(d)) evidence[name] = null;
        return evidence;
    }
}

/// <summary>The stable ids of the checks, and in which order they explain each other: causes before symptoms.</summary>
internal static class CheckIds
{
    public const string Rate = "rate";
    public const string Forecast = "forecast";
    public const string Divergence = "divergence";
    public const string FalseClaim = "false-claim";
    public const string Silent = "silent";
    public const string Polluted = "polluted";
    public const string Starved = "starved";
    public const string Stale = "stale";
    public const string Oscillation = "oscillation";
    public const string NoiseFloor = "noise-floor";
    public const string Slow = "slow";
    public const string Stall = "stall";
    public const string UnconvergedRun = "unconverged-run";
    public const string Capped = "capped";
    public const string Hang = "hang";
    public const string Drift = "drift";
    public const string UnequalFields = "unequal-fields";
    public const string Conditioning = "conditioning";
    public const string Spectrum = "spectrum";
    public const string Start = "start";
    public const string ErrorEstimate = "error-estimate";

    private static readonly string[] Order =
    [
        Divergence, FalseClaim, Silent, Polluted, Starved, Stale, Oscillation, NoiseFloor, Slow, Stall, UnconvergedRun, Capped, Hang, Drift, UnequalFields,
    ];

    /// <summary>Place in the order of causes; the last place for a check that stands in none.</summary>
    public static int Rank(string check)
    {
        var rank = Array.IndexOf(Order, check);
        return rank < 0 ? Order.Length : rank;
    }

    /// <summary>Whose advice comes first: as the causes, but where secants are used a broken basis is what a divergence is cured by.</summary>
    public static int AdviceRank(string check, bool secants) => secants && check == Divergence ? Rank(Oscillation) : Rank(check);

    /// <summary>It can be what lies behind a later one of the order.</summary>
    public static bool Explains(string check) => check is not (FalseClaim or Silent or Capped or Hang or Drift or UnequalFields);

    /// <summary>It may be no more than a symptom of an earlier one of the order.</summary>
    public static bool MayBeExplained(string check) => check is not (Divergence or FalseClaim or Silent or Hang or UnequalFields);

    /// <summary>Raised once until the settings change.</summary>
    public static bool OncePerSettings(string check) => check is Drift or UnequalFields;
}
