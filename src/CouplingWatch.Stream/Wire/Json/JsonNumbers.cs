using System.Text.Json;

namespace CouplingWatch.Wire.Json;

/// <summary>Numbers with the three strings JSON has no tokens for.</summary>
internal static class JsonNumbers
{
    public static double Read(ref Utf8JsonReader reader) => reader.TokenType switch
    {
        JsonTokenType.Number => reader.GetDouble(),
        JsonTokenType.String when reader.ValueTextEquals("NaN"u8) => double.NaN,
        JsonTokenType.String when reader.ValueTextEquals("Infinity"u8) => double.PositiveInfinity,
        JsonTokenType.String when reader.ValueTextEquals("-Infinity"u8) => double.NegativeInfinity,
        _ => throw new JsonException("Expected a number, or one of the strings NaN, Infinity, -Infinity."),
    };

    public static void Write(Utf8JsonWriter writer, double value)
    {
        if (double.IsFinite(value)) writer.WriteNumberValue(value);
        else writer.WriteStringValue(double.IsNaN(value) ? "NaN"u8 : value > 0 ? "Infinity"u8 : "-Infinity"u8);
    }
}
