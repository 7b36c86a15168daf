using System.Buffers;

namespace CouplingWatch.Ndjson.Parsing;

/// <summary>Turns the bare tokens that sloppy writers produce for numbers JSON has no token for (NaN, nan, -nan, inf, -inf, Infinity, …) into the strings the format knows.</summary>
internal static class SloppyTokens
{
    private static ReadOnlySpan<byte> Quotable => "\"\\nNiI"u8;

    /// <summary>Copies the line to <paramref name="target"/> with every such token replaced; false (and nothing of use written) when there is none.</summary>
    public static bool TryPatch(ReadOnlySpan<byte> line, IBufferWriter<byte> target)
    {
        var patched = false;
        var inString = false;
        var copied = 0;
        for (var i = 0; i < line.Length; i++)
        {
            if (inString)
            {
                var next = line[i..].IndexOfAny((byte)'"', (byte)'\\');
                if (next < 0) break;
                i += next;
                if (line[i] == '\\') i++;
                else inString = false;
                continue;
            }
            var skip = line[i..].IndexOfAny(Quotable);
            if (skip < 0) break;
            i += skip;
            if (line[i] == '"')
            {
                inString = true;
                continue;
            }
            if (!TryToken(line, i, out var start, out var length, out var text)) continue;
            target.Write(line[copied..start]);
            target.Write(text);
            copied = start + length;
            i = copied - 1;
            patched = true;
        }
        if (patched) target.Write(line[copied..]);
        return patched;
    }

    /// <summary>The token that begins at <paramref name="at"/>, a sign before it included.</summary>
    private static bool TryToken(ReadOnlySpan<byte> line, int at, out int start, out int length, out ReadOnlySpan<byte> text)
    {
        var letters = 0;
        while (at + letters < line.Length && IsLetter(line[at + letters])) letters++;
        var word = line.Slice(at, letters);
        var negative = at > 0 && line[at - 1] == '-';
        var signed = negative || (at > 0 && line[at - 1] == '+');
        start = signed ? at - 1 : at;
        length = letters + (signed ? 1 : 0);
        text = default;
        if (start > 0 && !IsBoundary(line[start - 1])) return false;
        if (EqualsAnyCase(word, "nan"u8)) text = "\"NaN\""u8;
        else if (EqualsAnyCase(word, "inf"u8) || EqualsAnyCase(word, "infinity"u8)) text = negative ? "\"-Infinity\""u8 : "\"Infinity\""u8;
        return !text.IsEmpty;
    }

    private static bool IsLetter(byte b) => (b | 0x20) is >= (byte)'a' and <= (byte)'z';

    private static bool IsBoundary(byte b) => b is (byte)':' or (byte)',' or (byte)'[' or (byte)' ' or (byte)'\t';

    private static bool EqualsAnyCase(ReadOnlySpan<byte> word, ReadOnlySpan<byte> lower)
    {
        if (word.Length != lower.Length) return false;
        for (var i = 0; i < word.Length; i++)
        {
            if ((word[i] | 0x20) != lower[i]) return false;
        }
        return true;
    }
}
