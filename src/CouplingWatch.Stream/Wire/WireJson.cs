using System.Text.Encodings.Web;
using System.Text.Json;
using System.Text.Json.Serialization;
using System.Text.Unicode;
using CouplingWatch.Wire.Json;

namespace CouplingWatch.Wire;

/// <summary>
/// The one way JSON is written and read where it crosses a process: camelCase members, enums as kebab-case strings,
/// NaN and infinities as "NaN", "Infinity", "-Infinity", numbers so that they read back exactly, null members left out.
/// Member order in the text does not matter, unknown members are ignored, a missing required member is a <see cref="JsonException"/>.
/// </summary>
public static class WireJson
{
    /// <summary>Ready to use and read-only; safe for concurrent use.</summary>
    public static JsonSerializerOptions Options { get; } = Create();

    /// <summary>Brings another options object (a web framework's own) to the same rules.</summary>
    public static void Configure(JsonSerializerOptions options)
    {
        ArgumentNullException.ThrowIfNull(options);
        options.PropertyNamingPolicy = JsonNamingPolicy.CamelCase;
        options.DictionaryKeyPolicy = null;
        options.PropertyNameCaseInsensitive = false;
        options.NumberHandling = JsonNumberHandling.AllowNamedFloatingPointLiterals;
        options.DefaultIgnoreCondition = JsonIgnoreCondition.WhenWritingNull;
        options.AllowOutOfOrderMetadataProperties = true;
        options.MaxDepth = 64;
        // Leaves letters and mathematical signs as they are, still escapes what HTML could mistake for markup.
        options.Encoder = JavaScriptEncoder.Create(UnicodeRanges.All);
        options.Converters.Add(new JsonStringEnumConverter(JsonNamingPolicy.KebabCaseLower, allowIntegerValues: false));
        options.Converters.Add(new NamedValuesConverter());
        options.Converters.Add(new NumberRangeConverter());
        options.Converters.Add(new ColumnBirthConverter());
        options.Converters.Add(new AdjustableSettingsConverter());
    }

    private static JsonSerializerOptions Create()
    {
        var options = new JsonSerializerOptions();
        Configure(options);
        options.MakeReadOnly(populateMissingResolver: true);
        return options;
    }
}
