using System.Text.Json;
using System.Text.Json.Nodes;
using CouplingWatch.Records;
using CouplingWatch.Testing.Shapes;
using CouplingWatch.Wire;

namespace CouplingWatch.StreamTests.Wire;

public sealed class WireJsonTests
{
    public static TheoryData<Type> Shapes()
    {
        var data = new TheoryData<Type>();
        foreach (var type in typeof(RunSummary).Assembly.GetExportedTypes().Where(IsShape).OrderBy(t => t.Name, StringComparer.Ordinal)) data.Add(type);
        return data;
    }

    private static bool IsShape(Type type) =>
        type is { Namespace: "CouplingWatch.Wire", IsAbstract: false, IsEnum: false } && type.GetMethod("<Clone>$") is not null;

    [Theory]
    [MemberData(nameof(Shapes))]
    public void Every_shape_reads_back_as_it_was_written_with_every_member_set(Type type)
    {
        var made = FilledShape.Of(type);
        var text = JsonSerializer.Serialize(made, type, WireJson.Options);
        var back = JsonSerializer.Deserialize(text, type, WireJson.Options);
        Assert.Null(Structure.FirstDifference(made, back));
    }

    [Fact]
    public void Every_server_event_reads_back_through_its_base_even_when_the_discriminator_comes_last()
    {
        var events = typeof(ServerEvent).Assembly.GetExportedTypes().Where(t => t.IsSubclassOf(typeof(ServerEvent))).ToList();
        Assert.True(events.Count >= 9, $"{events.Count} server events");
        foreach (var type in events)
        {
            var made = (ServerEvent)FilledShape.Of(type);
            var node = JsonSerializer.SerializeToNode(made, WireJson.Options)!.AsObject();
            var discriminator = node["event"]!.GetValue<string>();
            node.Remove("event");
            node["event"] = discriminator;
            var back = JsonSerializer.Deserialize<ServerEvent>(node.ToJsonString(), WireJson.Options);
            Assert.Null(Structure.FirstDifference(made, back));
        }
    }

    [Theory]
    [InlineData(CouplingMethod.IqnIls, "iqn-ils")]
    [InlineData(CouplingMethod.IqnIlsm, "iqn-ilsm")]
    [InlineData(CouplingMethod.Mvqn, "mvqn")]
    [InlineData(FilterRule.OwnNorm, "own-norm")]
    [InlineData(FilterRule.PivotRatio, "pivot-ratio")]
    [InlineData(ToleranceReference.PreviousStep, "previous-step")]
    [InlineData(RevisionState.PickedUp, "picked-up")]
    [InlineData(AlertState.Unacknowledged, "unacknowledged")]
    [InlineData(Severity.Warning, "warning")]
    [InlineData(FieldNorm.Rms, "rms")]
    public void Enums_are_spelled_as_the_stream_format_spells_them(object value, string spelled)
    {
        Assert.Equal($"\"{spelled}\"", JsonSerializer.Serialize(value, value.GetType(), WireJson.Options));
        Assert.Equal(value, JsonSerializer.Deserialize($"\"{spelled}\"", value.GetType(), WireJson.Options));
        Assert.Throws<JsonException>(() => JsonSerializer.Deserialize("1", value.GetType(), WireJson.Options));
    }

    [Fact]
    public void Numbers_without_a_JSON_token_are_written_as_strings_also_inside_evidence()
    {
        var path = new PathPoint(1, double.NaN, double.NegativeInfinity);
        Assert.Equal("""{"iteration":1,"norm":"NaN","need":"-Infinity"}""", JsonSerializer.Serialize(path, WireJson.Options));
        var evidence = new JsonObject { ["norm"] = JsonValue.Create(double.PositiveInfinity) };
        Assert.Equal("""{"norm":"Infinity"}""", JsonSerializer.Serialize(evidence, WireJson.Options));
        Assert.Equal("""{"a":"NaN"}""", JsonSerializer.Serialize(new Dictionary<string, double> { ["a"] = double.NaN }, WireJson.Options));
    }

    [Fact]
    public void Adjustable_settings_are_one_flat_object()
    {
        const string text = """{"relaxation":[0.01,1],"historySteps":[0,40],"filterRule":["own-norm","pivot-ratio"],"commands":["dropHistory","stop"]}""";
        var adjustable = JsonSerializer.Deserialize<AdjustableSettings>(text, WireJson.Options)!;
        Assert.Equal(new NumberRange(0.01, 1), adjustable.Ranges["relaxation"]);
        Assert.Equal(["own-norm", "pivot-ratio"], adjustable.Choices["filterRule"]);
        Assert.True(adjustable.Allows("stop"));
        Assert.Equal(text, JsonSerializer.Serialize(adjustable, WireJson.Options));
    }

    [Fact]
    public void A_column_birth_has_its_attempt_only_where_it_is_not_0()
    {
        Assert.Equal("[6,1]", JsonSerializer.Serialize(new ColumnBirth(6, 1), WireJson.Options));
        Assert.Equal("[6,1,2]", JsonSerializer.Serialize(new ColumnBirth(6, 1, 2), WireJson.Options));
        Assert.Equal(new ColumnBirth(5, 3), JsonSerializer.Deserialize<ColumnBirth>("[5,3]", WireJson.Options));
        foreach (var bad in (string[])["[5]", "[5,1,0,0]", "[-1,0]", "5", "[5,1.5]"])
            Assert.Throws<JsonException>(() => JsonSerializer.Deserialize<ColumnBirth>(bad, WireJson.Options));
    }

    [Fact]
    public void Null_members_are_left_out_and_a_missing_required_member_is_named()
    {
        Assert.Equal("""{"relaxation":0.5}""", JsonSerializer.Serialize(new CouplingSettings { Relaxation = 0.5 }, WireJson.Options));
        var thrown = Assert.Throws<JsonException>(() => JsonSerializer.Deserialize<SettingsProposal>("{}", WireJson.Options));
        Assert.Contains("settings", thrown.Message, StringComparison.Ordinal);
    }
}
