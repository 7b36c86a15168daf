using System.Globalization;
using System.Text;
using System.Text.Json;
using System.Text.Json.Nodes;

namespace CouplingWatch.Ndjson.Parsing;

/// <summary>Reads the value at hand as what it must be. The Maybe forms take JSON null for "not sent".</summary>
internal ref partial struct RecordCursor
{
    private const double MostExactInteger = 9007199254740991;

    public bool Number(out double value, double least = double.NegativeInfinity)
    {
        if (Json.TokenType == JsonTokenType.Number)
        {
            value = Json.GetDouble();
            return value >= least || Fail(ProblemCodes.OutOfRange, $"a number not below {least.ToString(CultureInfo.InvariantCulture)}");
        }
        value = double.NaN;
        if (Json.TokenType == JsonTokenType.String)
        {
            if (Json.ValueTextEquals("NaN"u8)) return true;
            value = Json.ValueTextEquals("Infinity"u8) ? double.PositiveInfinity : Json.ValueTextEquals("-Infinity"u8) ? double.NegativeInfinity : double.NaN;
            if (!double.IsNaN(value)) return true;
        }
        return Fail(ProblemCodes.WrongType, "a number, or one of the strings NaN, Infinity, -Infinity");
    }

    public bool MaybeNumber(out double? value, double least = double.NegativeInfinity)
    {
        value = null;
        if (Json.TokenType == JsonTokenType.Null) return true;
        if (!Number(out var number, least)) return false;
        value = number;
        return true;
    }

    public bool Integer(out long value, long least = 0, long most = (long)MostExactInteger)
    {
        value = 0;
        if (Json.TokenType != JsonTokenType.Number) return Fail(ProblemCodes.WrongType, "a whole number");
        if (!Json.TryGetInt64(out value))
        {
            // 3.0 and 1e2 are whole numbers too.
            var number = Json.GetDouble();
            if (number != Math.Floor(number)) return Fail(ProblemCodes.WrongType, "a whole number");
            if (Math.Abs(number) > MostExactInteger) return Fail(ProblemCodes.OutOfRange, $"a whole number from {least} to {most}");
            value = (long)number;
        }
        return (value >= least && value <= most) || Fail(ProblemCodes.OutOfRange, $"a whole number from {least} to {most}");
    }

    public bool Int(out int value, int least = 0)
    {
        var good = Integer(out var number, least, int.MaxValue);
        value = good ? (int)number : 0;
        return good;
    }

    public bool MaybeInt(out int? value, int least = 0)
    {
        value = null;
        if (Json.TokenType == JsonTokenType.Null) return true;
        if (!Int(out var number, least)) return false;
        value = number;
        return true;
    }

    public bool Flag(out bool value)
    {
        value = Json.TokenType == JsonTokenType.True;
        return Json.TokenType is JsonTokenType.True or JsonTokenType.False || Fail(ProblemCodes.WrongType, "true or false");
    }

    public bool Text(out string value)
    {
        value = "";
        if (Json.TokenType != JsonTokenType.String) return Fail(ProblemCodes.WrongType, "a string");
        value = Json.GetString()!;
        return true;
    }

    public bool MaybeText(out string? value)
    {
        value = null;
        if (Json.TokenType == JsonTokenType.Null) return true;
        if (!Text(out var text)) return false;
        value = text;
        return true;
    }

    /// <summary>A field, solver or group name, interned; not empty.</summary>
    public bool Name(out string value)
    {
        value = "";
        if (Json.TokenType != JsonTokenType.String) return Fail(ProblemCodes.WrongType, "a name");
        value = Json.ValueIsEscaped ? scratch.Names.Intern(Encoding.UTF8.GetBytes(Json.GetString()!)) : scratch.Names.Intern(Json.ValueSpan);
        return value.Length > 0 || Fail(ProblemCodes.OutOfRange, "a name that is not empty");
    }

    public bool MaybeName(out string? value)
    {
        value = null;
        if (Json.TokenType == JsonTokenType.Null) return true;
        if (!Name(out var name)) return false;
        value = name;
        return true;
    }

    public bool Word<T>(out T value)
        where T : struct, Enum
    {
        value = default;
        if (Json.TokenType != JsonTokenType.String) return Fail(ProblemCodes.WrongType, EnumWords<T>.Expected);
        return EnumWords<T>.TryRead(ref Json, out value) || Fail(ProblemCodes.UnknownValue, EnumWords<T>.Expected);
    }

    public bool MaybeWord<T>(out T? value)
        where T : struct, Enum
    {
        value = null;
        if (Json.TokenType == JsonTokenType.Null) return true;
        if (!Word<T>(out var word)) return false;
        value = word;
        return true;
    }

    /// <summary>An RFC 3339 time; without its offset it would mean another moment on every machine, so that is a problem.</summary>
    public bool MaybeTime(out DateTimeOffset? value)
    {
        const string expected = "an RFC 3339 time with offset, such as 2026-12-01T08:00:00Z";
        value = null;
        if (Json.TokenType == JsonTokenType.Null) return true;
        if (Json.TokenType != JsonTokenType.String) return Fail(ProblemCodes.WrongType, expected);
        var text = Json.ValueSpan;
        var zone = text.Length > 19 ? text[19..] : default;
        if (zone.IndexOfAny("Zz+-"u8) < 0 || !Json.TryGetDateTimeOffset(out var time)) return Fail(ProblemCodes.OutOfRange, expected);
        value = time;
        return true;
    }

    /// <summary>An object kept as it was sent.</summary>
    public bool Kept(out JsonObject? value)
    {
        value = null;
        if (Json.TokenType == JsonTokenType.Null) return true;
        if (Json.TokenType != JsonTokenType.StartObject) return Fail(ProblemCodes.WrongType, "an object");
        var copy = this;
        if (!copy.SkipValue())
        {
            Problem = copy.Problem;
            return false;
        }
        var parsed = JsonNode.Parse(ref Json)!.AsObject();
        try
        {
            ReadThrough(parsed);
        }
        catch (ArgumentException)
        {
            return Fail(ProblemCodes.Duplicate, "every name once", "the same name twice");
        }
        value = parsed;
        return true;
    }

    /// <summary>A parsed object finds a repeated name only when it is first read; that must not happen later.</summary>
    private static void ReadThrough(JsonNode? node)
    {
        if (node is JsonObject map)
        {
            foreach (var (_, inner) in map) ReadThrough(inner);
        }
        else if (node is JsonArray list)
        {
            foreach (var inner in list) ReadThrough(inner);
        }
    }
}
