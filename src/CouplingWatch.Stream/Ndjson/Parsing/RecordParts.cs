using System.Text;
using System.Text.Json;
using CouplingWatch.Records;

namespace CouplingWatch.Ndjson.Parsing;

/// <summary>What several kinds of records have in common.</summary>
internal static class RecordParts
{
    public static bool Seq(ref RecordCursor c, out long? seq)
    {
        seq = null;
        if (!c.Integer(out var number)) return false;
        seq = number;
        return true;
    }

    public static bool SeqGiven(ref RecordCursor c, long? seq) => seq is not null || c.FailMissing("seq", "the place in the stream, a whole number from 0");

    public static StreamRecord? Missing(ref RecordCursor c, string name, string expected)
    {
        c.FailMissing(name, expected);
        return null;
    }

    /// <summary>Texts by name; numbers and flags are taken as the text they stand in.</summary>
    public static bool Texts(ref RecordCursor c, out IReadOnlyDictionary<string, string> texts)
    {
        texts = OpenRecord.EmptyStrings;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject("an object of texts by name")) return false;
        var made = new Dictionary<string, string>(StringComparer.Ordinal);
        while (c.NextMember())
        {
            var name = c.Json.GetString()!;
            c.MemberName();
            if (c.Json.TokenType is JsonTokenType.Number or JsonTokenType.True or JsonTokenType.False) made[name] = Encoding.UTF8.GetString(c.Json.ValueSpan);
            else if (c.Text(out var text)) made[name] = text;
            else return false;
        }
        texts = made;
        return c.Problem is null;
    }
}
