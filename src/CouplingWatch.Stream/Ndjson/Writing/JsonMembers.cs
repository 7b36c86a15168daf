using System.Runtime.InteropServices;
using System.Text.Json;
using CouplingWatch.Records;
using CouplingWatch.Wire.Json;

namespace CouplingWatch.Ndjson.Writing;

/// <summary>Members that are left out when they were not sent, and the forms the format has for numbers and vectors.</summary>
internal static class JsonMembers
{
    public static void Maybe(this Utf8JsonWriter json, ReadOnlySpan<byte> name, string? value)
    {
        if (value is not null) json.WriteString(name, value);
    }

    public static void Maybe(this Utf8JsonWriter json, ReadOnlySpan<byte> name, int? value)
    {
        if (value is { } number) json.WriteNumber(name, number);
    }

    public static void Maybe(this Utf8JsonWriter json, ReadOnlySpan<byte> name, double? value)
    {
        if (value is not { } number) return;
        json.WritePropertyName(name);
        JsonNumbers.Write(json, number);
    }

    public static void Maybe(this Utf8JsonWriter json, ReadOnlySpan<byte> name, NamedValues? values)
    {
        if (values is null) return;
        json.WriteStartObject(name);
        for (var i = 0; i < values.Count; i++)
        {
            json.WritePropertyName(values.Names[i]);
            JsonNumbers.Write(json, values.Values[i]);
        }
        json.WriteEndObject();
    }

    public static void Maybe(this Utf8JsonWriter json, ReadOnlySpan<byte> name, double[]? values)
    {
        if (values is null) return;
        json.WriteStartArray(name);
        foreach (var value in values) JsonNumbers.Write(json, value);
        json.WriteEndArray();
    }

    public static void Texts(this Utf8JsonWriter json, ReadOnlySpan<byte> name, IReadOnlyDictionary<string, string> texts)
    {
        if (texts.Count == 0) return;
        json.WriteStartObject(name);
        foreach (var (key, value) in texts) json.WriteString(key, value);
        json.WriteEndObject();
    }

    /// <summary>Base64 of little-endian float64.</summary>
    public static void Vector(this Utf8JsonWriter json, ReadOnlySpan<byte> name, double[] values)
    {
        if (BitConverter.IsLittleEndian)
        {
            json.WriteBase64String(name, MemoryMarshal.AsBytes(values.AsSpan()));
            return;
        }
        var bytes = new byte[8 * values.Length];
        for (var i = 0; i < values.Length; i++) System.Buffers.Binary.BinaryPrimitives.WriteDoubleLittleEndian(bytes.AsSpan(8 * i), values[i]);
        json.WriteBase64String(name, bytes);
    }
}
