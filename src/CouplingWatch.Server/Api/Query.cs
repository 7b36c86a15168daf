using System.Text.Json;
using CouplingWatch.Records;

namespace CouplingWatch.Server.Api;

/// <summary>Words in addresses, spelt as in the stream.</summary>
internal static class Query
{
    public static readonly string FilterRules = string.Join(", ", Enum.GetNames<FilterRule>().Select(JsonNamingPolicy.KebabCaseLower.ConvertName));

    /// <summary>True with null when nothing was asked.</summary>
    public static bool TryFilterRule(string? text, out FilterRule? rule)
    {
        rule = null;
        if (text is null) return true;
        foreach (var known in Enum.GetValues<FilterRule>())
        {
            if (JsonNamingPolicy.KebabCaseLower.ConvertName(known.ToString()) != text) continue;
            rule = known;
            return true;
        }
        return false;
    }
}
