using System.Text.Json;
using System.Text.Json.Serialization;
using CouplingWatch.Records;

namespace CouplingWatch.Wire.Json;

/// <summary><see cref="NamedValues"/> as an object of numbers, in the order kept.</summary>
internal sealed class NamedValuesConverter : JsonConverter<NamedValues>
{
    public override NamedValues Read(ref Utf8JsonReader reader, Type typeToConvert, JsonSerializerOptions options)
    {
        if (reader.TokenType != JsonTokenType.StartObject) throw new JsonException("Expected an object of numbers by name.");
        var names = new List<string>();
        var values = new List<double>();
        while (reader.Read() && reader.TokenType == JsonTokenType.PropertyName)
        {
            names.Add(reader.GetString()!);
            reader.Read();
            values.Add(JsonNumbers.Read(ref reader));
        }
        return new NamedValues([.. names], [.. values]);
    }

    public override void Write(Utf8JsonWriter writer, NamedValues value, JsonSerializerOptions options)
    {
        writer.WriteStartObject();
        for (var i = 0; i < value.Count; i++)
        {
            writer.WritePropertyName(value.Names[i]);
            JsonNumbers.Write(writer, value.Values[i]);
        }
        writer.WriteEndObject();
    }
}
