using System.Buffers;
using System.Buffers.Binary;
using System.Buffers.Text;
using System.Runtime.InteropServices;
using System.Text;
using System.Text.Json;
using CouplingWatch.Records;

namespace CouplingWatch.Ndjson.Parsing;

/// <summary>Numbers by name, lists of numbers, and vectors as base64 of little-endian float64, decoded straight into their array.</summary>
internal static class VectorValues
{
    private const string Base64Expected = "base64 of little-endian float64";

    /// <param name="norms">True: the values are norms, so a negative one is a problem.</param>
    public static bool Named(ref RecordCursor c, out NamedValues? values, bool norms = false)
    {
        values = null;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject("an object of numbers by name")) return false;
        var count = 0;
        while (c.NextMember())
        {
            var name = c.MemberName();
            if (!c.Number(out var value)) return false;
            if (norms && value < 0 && double.IsFinite(value)) return c.Fail(ProblemCodes.OutOfRange, "a norm, which is not negative");
            if (!Add(ref c, ref count, name, value)) return false;
        }
        values = Gather(c.Scratch, count);
        return c.Problem is null;
    }

    /// <summary>True and false by name, as 1 and 0.</summary>
    public static bool Flags(ref RecordCursor c, out NamedValues? values)
    {
        values = null;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject("an object of true and false by name")) return false;
        var count = 0;
        while (c.NextMember())
        {
            var name = c.MemberName();
            if (!c.Flag(out var value) || !Add(ref c, ref count, name, value ? 1 : 0)) return false;
        }
        values = Gather(c.Scratch, count);
        return c.Problem is null;
    }

    public static bool Numbers(ref RecordCursor c, out double[]? values)
    {
        values = null;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterArray("a list of numbers")) return false;
        var list = c.Scratch.Numbers;
        list.Clear();
        while (c.NextElement(list.Count))
        {
            if (!c.Number(out var value)) return false;
            list.Add(value);
        }
        values = [.. list];
        return c.Problem is null;
    }

    public static bool Vector(ref RecordCursor c, out double[]? values)
    {
        values = null;
        if (c.Json.TokenType != JsonTokenType.String) return c.Fail(ProblemCodes.WrongType, Base64Expected);
        // Some writers escape the slash; then the text must be unescaped first.
        var text = c.Json.ValueIsEscaped ? Encoding.UTF8.GetBytes(c.Json.GetString()!) : c.Json.ValueSpan;
        if (text.Length % 4 != 0) return c.Fail(ProblemCodes.BadBase64, $"{Base64Expected}, whose length is a multiple of 4", $"{text.Length} characters");
        var bytes = (text.Length / 4 * 3) - (text.EndsWith("=="u8) ? 2 : text.EndsWith("="u8) ? 1 : 0);
        if (bytes % 8 != 0) return c.Fail(ProblemCodes.WrongLength, "a multiple of 8 bytes (float64)", $"{bytes} bytes");
        var made = new double[bytes / 8];
        var target = MemoryMarshal.AsBytes(made.AsSpan());
        if (Base64.DecodeFromUtf8(text, target, out var consumed, out var written) != OperationStatus.Done || written != bytes || consumed != text.Length)
            return c.Fail(ProblemCodes.BadBase64, Base64Expected, "a text that is not base64");
        if (!BitConverter.IsLittleEndian)
        {
            var words = MemoryMarshal.Cast<double, ulong>(made.AsSpan());
            BinaryPrimitives.ReverseEndianness(words, words);
        }
        values = made;
        return true;
    }

    private static bool Add(ref RecordCursor c, ref int count, string name, double value)
    {
        var scratch = c.Scratch;
        for (var i = 0; i < count; i++)
        {
            if (scratch.NameBuffer[i] == name) return c.Fail(ProblemCodes.Duplicate, "every name once", "the same name twice");
        }
        if (count == ParseScratch.NamedLimit) return c.Fail(ProblemCodes.OutOfRange, $"at most {ParseScratch.NamedLimit} names");
        if (count == scratch.NameBuffer.Length)
        {
            var names = scratch.NameBuffer;
            var values = scratch.ValueBuffer;
            Array.Resize(ref names, 2 * count);
            Array.Resize(ref values, 2 * count);
            (scratch.NameBuffer, scratch.ValueBuffer) = (names, values);
        }
        scratch.NameBuffer[count] = name;
        scratch.ValueBuffer[count++] = value;
        return true;
    }

    private static NamedValues Gather(ParseScratch scratch, int count) =>
        new(scratch.Names.InternSet(scratch.NameBuffer.AsSpan(0, count)), scratch.ValueBuffer.AsSpan(0, count).ToArray());
}
