using System.Text.Json;

namespace CouplingWatch.Monitoring.Journal;

/// <summary>Which process sent a run: the <c>instance</c> its <c>open</c> record states.</summary>
public static class OpenInstance
{
    /// <summary>The instance in the record of seq 0; null for any other entry, or when none was sent.</summary>
    public static string? Of(JournalEntry entry)
    {
        ArgumentNullException.ThrowIfNull(entry);
        if (entry.Kind != JournalEntryKind.Record || entry.Seq != 0) return null;
        var json = new Utf8JsonReader(entry.Body.Span);
        try
        {
            while (json.Read())
            {
                if (json.CurrentDepth != 1 || json.TokenType != JsonTokenType.PropertyName) continue;
                var wanted = json.ValueTextEquals("instance"u8);
                json.Read();
                if (wanted) return json.TokenType == JsonTokenType.String ? json.GetString() : null;
                json.Skip();
            }
        }
        catch (JsonException)
        {
            // A record kept with bare NaN tokens is no strict JSON; what stood before them was read.
        }
        return null;
    }
}
