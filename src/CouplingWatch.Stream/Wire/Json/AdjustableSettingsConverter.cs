using System.Text.Json;
using System.Text.Json.Serialization;
using CouplingWatch.Records;

namespace CouplingWatch.Wire.Json;

/// <summary>
/// <see cref="AdjustableSettings"/> as one flat object: two numbers are a closed range, a list of strings the allowed values,
/// <c>commands</c> the commands the code takes.
/// </summary>
internal sealed class AdjustableSettingsConverter : JsonConverter<AdjustableSettings>
{
    public override AdjustableSettings Read(ref Utf8JsonReader reader, Type typeToConvert, JsonSerializerOptions options)
    {
        if (reader.TokenType != JsonTokenType.StartObject) throw new JsonException("Expected an object of ranges and lists.");
        var ranges = new Dictionary<string, NumberRange>(StringComparer.Ordinal);
        var choices = new Dictionary<string, IReadOnlyList<string>>(StringComparer.Ordinal);
        IReadOnlyList<string> commands = [];
        while (reader.Read() && reader.TokenType == JsonTokenType.PropertyName)
        {
            var name = reader.GetString()!;
            reader.Read();
            if (reader.TokenType != JsonTokenType.StartArray) throw new JsonException($"Expected [low, high] or a list of strings for {name}.");
            var probe = reader;
            probe.Read();
            if (probe.TokenType == JsonTokenType.Number)
            {
                ranges[name] = JsonSerializer.Deserialize<NumberRange>(ref reader, options);
                continue;
            }
            var list = JsonSerializer.Deserialize<string[]>(ref reader, options)!;
            if (name == "commands") commands = list;
            else choices[name] = list;
        }
        return new AdjustableSettings { Ranges = ranges, Choices = choices, Commands = commands };
    }

    public override void Write(Utf8JsonWriter writer, AdjustableSettings value, JsonSerializerOptions options)
    {
        writer.WriteStartObject();
        foreach (var (name, range) in value.Ranges)
        {
            writer.WritePropertyName(name);
            JsonSerializer.Serialize(writer, range, options);
        }
        foreach (var (name, list) in value.Choices) WriteList(writer, name, list);
        if (value.Commands.Count > 0) WriteList(writer, "commands", value.Commands);
        writer.WriteEndObject();
    }

    private static void WriteList(Utf8JsonWriter writer, string name, IReadOnlyList<string> list)
    {
        writer.WriteStartArray(name);
        foreach (var entry in list) writer.WriteStringValue(entry);
        writer.WriteEndArray();
    }
}
