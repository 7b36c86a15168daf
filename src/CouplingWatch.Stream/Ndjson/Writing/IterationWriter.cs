using System.Text.Json;
using CouplingWatch.Records;

namespace CouplingWatch.Ndjson.Writing;

/// <summary>The members of the <c>iteration</c> record.</summary>
internal static class IterationWriter
{
    public static void Write(Utf8JsonWriter json, IterationRecord record)
    {
        json.WriteNumber("step"u8, record.Step);
        json.WriteNumber("iteration"u8, record.Iteration);
        json.Maybe("attempt"u8, record.Attempt);
        json.Maybe("time"u8, record.Time);
        json.Maybe("timeStep"u8, record.TimeStep);
        json.Maybe("residuals"u8, record.Residuals);
        json.Maybe("magnitudes"u8, record.Magnitudes);
        json.Maybe("targets"u8, record.Targets);
        if (record.Met is { } met) Met(json, met);
        json.Maybe("seconds"u8, record.Seconds);
        json.Maybe("passSeconds"u8, record.PassSeconds);
        json.Maybe("relaxation"u8, record.Relaxation);
        if (record.Worst.Count > 0) Worst(json, record.Worst);
        Group(json, record.Vectors, record.Sketch, record.Basis);
        if (record.Surrogate is { } surrogate) Surrogate(json, surrogate);
        if (record.Groups is not { } groups) return;
        json.WriteStartObject("groups"u8);
        foreach (var (name, data) in groups)
        {
            json.WriteStartObject(name);
            Group(json, data.Vectors, data.Sketch, data.Basis);
            json.WriteEndObject();
        }
        json.WriteEndObject();
    }

    private static void Met(Utf8JsonWriter json, NamedValues met)
    {
        json.WriteStartObject("met"u8);
        for (var i = 0; i < met.Count; i++) json.WriteBoolean(met.Names[i], met.Values[i] != 0);
        json.WriteEndObject();
    }

    private static void Worst(Utf8JsonWriter json, IReadOnlyList<WorstResidual> worst)
    {
        json.WriteStartObject("worst"u8);
        foreach (var place in worst)
        {
            json.WriteStartObject(place.Field);
            json.WriteNumber("index"u8, place.Index);
            json.Maybe("value"u8, place.Value);
            json.Maybe("at"u8, place.At);
            json.WriteEndObject();
        }
        json.WriteEndObject();
    }

    private static void Group(Utf8JsonWriter json, VectorPair? vectors, SketchPair? sketch, BasisReport? basis)
    {
        if (vectors is not null)
        {
            json.WriteStartObject("vectors"u8);
            json.Vector("residual"u8, vectors.Residual);
            json.Vector("output"u8, vectors.Output);
            json.WriteEndObject();
        }
        if (sketch is not null)
        {
            json.WriteStartObject("sketch"u8);
            json.WriteNumber("rows"u8, sketch.Rows);
            json.WriteNumber("seed"u8, sketch.Seed);
            json.Maybe("fullRows"u8, sketch.FullRows);
            json.Vector("residual"u8, sketch.Residual);
            json.Vector("output"u8, sketch.Output);
            json.WriteEndObject();
        }
        if (basis is not null)
        {
            json.WriteStartObject("basis"u8);
            Births(json, "columns"u8, basis.Columns);
            Births(json, "left"u8, basis.Left);
            json.Maybe("r"u8, basis.R);
            json.Maybe("coefficients"u8, basis.Coefficients);
            json.WriteEndObject();
        }
    }

    private static void Births(Utf8JsonWriter json, ReadOnlySpan<byte> name, ColumnBirth[] births)
    {
        json.WriteStartArray(name);
        foreach (var birth in births)
        {
            json.WriteStartArray();
            json.WriteNumberValue(birth.Step);
            json.WriteNumberValue(birth.Iteration);
            if (birth.Attempt != 0) json.WriteNumberValue(birth.Attempt);
            json.WriteEndArray();
        }
        json.WriteEndArray();
    }

    private static void Surrogate(Utf8JsonWriter json, SurrogateReport surrogate)
    {
        json.WriteStartObject("surrogate"u8);
        json.Maybe("iterations"u8, surrogate.Iterations);
        json.Maybe("seconds"u8, surrogate.Seconds);
        json.Maybe("covered"u8, surrogate.Covered);
        json.WriteEndObject();
    }
}
