using System.Text.Json;
using System.Text.Json.Serialization;
using CouplingWatch.Records;

namespace CouplingWatch.Wire.Json;

/// <summary><see cref="ColumnBirth"/> as <c>[step, iteration]</c>, with the attempt as a third number where it is not 0.</summary>
internal sealed class ColumnBirthConverter : JsonConverter<ColumnBirth>
{
    public override ColumnBirth Read(ref Utf8JsonReader reader, Type typeToConvert, JsonSerializerOptions options)
    {
        if (reader.TokenType != JsonTokenType.StartArray) throw new JsonException("Expected [step, iteration] or [step, iteration, attempt].");
        Span<int> parts = stackalloc int[3];
        var count = 0;
        while (reader.Read() && reader.TokenType != JsonTokenType.EndArray)
        {
            if (count == 3 || !reader.TryGetInt32(out parts[count]) || parts[count] < 0)
                throw new JsonException("Expected two or three whole numbers from 0.");
            count++;
        }
        if (count < 2) throw new JsonException("Expected [step, iteration] or [step, iteration, attempt].");
        return new ColumnBirth(parts[0], parts[1], parts[2]);
    }

    public override void Write(Utf8JsonWriter writer, ColumnBirth value, JsonSerializerOptions options)
    {
        writer.WriteStartArray();
        writer.WriteNumberValue(value.Step);
        writer.WriteNumberValue(value.Iteration);
        if (value.Attempt != 0) writer.WriteNumberValue(value.Attempt);
        writer.WriteEndArray();
    }
}
