using System.Text;
using System.Text.Json;

namespace CouplingWatch.Ndjson.Parsing;

/// <summary>The words of an enum in the stream: kebab-case, as UTF-8.</summary>
internal static class EnumWords<T>
    where T : struct, Enum
{
    private static readonly T[] Values = Enum.GetValues<T>();
    private static readonly string[] Words = [.. Values.Select(v => JsonNamingPolicy.KebabCaseLower.ConvertName(v.ToString()))];
    private static readonly byte[][] Utf8 = [.. Words.Select(Encoding.UTF8.GetBytes)];

    public static string Expected { get; } = "one of " + string.Join(", ", Words);

    public static string Word(T value) => Words[Array.IndexOf(Values, value)];

    public static bool TryRead(ref Utf8JsonReader reader, out T value)
    {
        for (var i = 0; i < Utf8.Length; i++)
        {
            if (!reader.ValueTextEquals(Utf8[i])) continue;
            value = Values[i];
            return true;
        }
        value = default;
        return false;
    }
}
