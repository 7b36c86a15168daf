using System.Globalization;
using System.Text.Json.Serialization;
using CouplingWatch.Server.Problems;

namespace CouplingWatch.Server.Api;

/// <summary>A list of the interface.</summary>
/// <param name="Next">Give it as <c>after</c> for the next page; null on the last.</param>
internal sealed record Page<T>(IReadOnlyList<T> Items, [property: JsonIgnore(Condition = JsonIgnoreCondition.Never)] string? Next)
{
    /// <summary>The items behind <paramref name="after"/>, at most <paramref name="limit"/>.</summary>
    /// <param name="key">What names an item in <c>after</c>; distinct.</param>
    /// <param name="behind">Whether a key lies behind <paramref name="after"/> in the order of the list.</param>
    public static Page<T> Of(IEnumerable<T> ordered, Func<T, string> key, Func<string, bool>? behind, int limit)
    {
        var rest = (behind is null ? ordered : ordered.SkipWhile(i => !behind(key(i)))).Take(limit + 1).ToList();
        if (rest.Count <= limit) return new Page<T>(rest, null);
        rest.RemoveAt(limit);
        return new Page<T>(rest, key(rest[^1]));
    }

    public static Page<T> Whole(IReadOnlyList<T> items) => new(items, null);
}

/// <summary>Bounds of <c>limit</c>.</summary>
internal static class Paging
{
    public const int Default = 100;
    public const int Most = 1000;

    public static IResult? Refuse(int? limit) => limit is null or (>= 1 and <= Most)
        ? null
        : Problem.BadQuery.Because(string.Create(CultureInfo.InvariantCulture, $"limit is 1 to {Most}, not {limit}."), ("member", "limit"), ("expected", $"1 to {Most}"));
}
