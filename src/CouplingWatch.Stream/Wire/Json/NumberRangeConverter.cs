using System.Text.Json;
using System.Text.Json.Serialization;
using CouplingWatch.Records;

namespace CouplingWatch.Wire.Json;

/// <summary><see cref="NumberRange"/> as <c>[low, high]</c>.</summary>
internal sealed class NumberRangeConverter : JsonConverter<NumberRange>
{
    public override NumberRange Read(ref Utf8JsonReader reader, Type typeToConvert, JsonSerializerOptions options)
    {
        if (reader.TokenType != JsonTokenType.StartArray) throw new JsonException("Expected [low, high].");
        reader.Read();
        var low = JsonNumbers.Read(ref reader);
        reader.Read();
        var high = JsonNumbers.Read(ref reader);
        reader.Read();
        if (reader.TokenType != JsonTokenType.EndArray) throw new JsonException("Expected exactly two numbers, [low, high].");
        return new NumberRange(low, high);
    }

    public override void Write(Utf8JsonWriter writer, NumberRange value, JsonSerializerOptions options)
    {
        writer.WriteStartArray();
        JsonNumbers.Write(writer, value.Low);
        JsonNumbers.Write(writer, value.High);
        writer.WriteEndArray();
    }
}
