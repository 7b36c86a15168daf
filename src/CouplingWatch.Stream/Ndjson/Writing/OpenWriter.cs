using System.Text.Json;
using CouplingWatch.Ndjson.Parsing;
using CouplingWatch.Records;
using CouplingWatch.Wire.Json;

namespace CouplingWatch.Ndjson.Writing;

/// <summary>The members of the <c>open</c> record, and the declarations and settings other records share with it.</summary>
internal static class OpenWriter
{
    public static void Write(Utf8JsonWriter json, OpenRecord record)
    {
        json.WriteNumber("format"u8, record.Format);
        json.Maybe("instance"u8, record.Instance);
        json.Maybe("campaign"u8, record.Campaign);
        json.Maybe("title"u8, record.Title);
        json.WriteString("scheme"u8, EnumWords<CouplingScheme>.Word(record.Scheme));
        json.WriteString("stepping"u8, EnumWords<Stepping>.Word(record.Stepping));
        Solvers(json, record.Solvers);
        Fields(json, record.Fields);
        Settings(json, record.Settings);
        if (!record.Adjustable.IsEmpty) Adjustable(json, record.Adjustable);
        json.Maybe("timeStep"u8, record.TimeStep);
        json.Maybe("endTime"u8, record.EndTime);
        if (record.AllocationEndsAt is { } end) json.WriteString("allocationEndsAt"u8, end);
        json.Maybe("nodes"u8, record.Nodes);
        json.Maybe("beatSeconds"u8, record.BeatSeconds);
        if (record.Continues is { } continues)
        {
            json.WriteStartObject("continues"u8);
            json.WriteString("run"u8, continues.Run);
            json.Maybe("step"u8, continues.Step);
            json.Maybe("basis"u8, continues.Basis);
            json.WriteEndObject();
        }
        json.Texts("provenance"u8, record.Provenance);
        json.Texts("labels"u8, record.Labels);
    }

    private static void Solvers(Utf8JsonWriter json, IReadOnlyList<SolverDeclaration> solvers)
    {
        json.WriteStartArray("solvers"u8);
        foreach (var solver in solvers)
        {
            json.WriteStartObject();
            json.WriteString("name"u8, solver.Name);
            json.Maybe("noise"u8, solver.Noise);
            json.Maybe("cost"u8, solver.Cost);
            json.WriteEndObject();
        }
        json.WriteEndArray();
    }

    public static void Fields(Utf8JsonWriter json, IReadOnlyList<FieldDeclaration> fields)
    {
        json.WriteStartArray("fields"u8);
        foreach (var field in fields)
        {
            json.WriteStartObject();
            json.WriteString("name"u8, field.Name);
            json.Maybe("unit"u8, field.Unit);
            json.Maybe("size"u8, field.Size);
            json.WriteString("role"u8, EnumWords<FieldRole>.Word(field.Role));
            json.Maybe("from"u8, field.From);
            json.Maybe("group"u8, field.Group);
            json.Maybe("weight"u8, field.Weight);
            json.WriteString("norm"u8, EnumWords<FieldNorm>.Word(field.Norm));
            json.WriteString("relativeTo"u8, EnumWords<ToleranceReference>.Word(field.RelativeTo));
            json.Maybe("relative"u8, field.Relative);
            json.Maybe("absolute"u8, field.Absolute);
            json.WriteEndObject();
        }
        json.WriteEndArray();
    }

    public static void Settings(Utf8JsonWriter json, CouplingSettings settings)
    {
        json.WriteStartObject("settings"u8);
        if (settings.Method is { } method) json.WriteString("method"u8, EnumWords<CouplingMethod>.Word(method));
        json.Maybe("relaxation"u8, settings.Relaxation);
        json.Maybe("historySteps"u8, settings.HistorySteps);
        if (settings.FilterRule is { } rule) json.WriteString("filterRule"u8, EnumWords<FilterRule>.Word(rule));
        json.Maybe("filterThreshold"u8, settings.FilterThreshold);
        json.Maybe("iterationCap"u8, settings.IterationCap);
        json.Maybe("predictorOrder"u8, settings.PredictorOrder);
        json.Maybe("tolerance"u8, settings.Tolerance);
        json.Maybe("surrogate"u8, settings.Surrogate);
        if (settings.Own is { } own)
        {
            json.WritePropertyName("own"u8);
            own.WriteTo(json);
        }
        json.WriteEndObject();
    }

    private static void Adjustable(Utf8JsonWriter json, AdjustableSettings adjustable)
    {
        json.WriteStartObject("adjustable"u8);
        foreach (var (name, range) in adjustable.Ranges)
        {
            json.WriteStartArray(name);
            JsonNumbers.Write(json, range.Low);
            JsonNumbers.Write(json, range.High);
            json.WriteEndArray();
        }
        foreach (var (name, list) in adjustable.Choices) List(json, name, list);
        if (adjustable.Commands.Count > 0) List(json, "commands", adjustable.Commands);
        json.WriteEndObject();
    }

    private static void List(Utf8JsonWriter json, string name, IReadOnlyList<string> list)
    {
        json.WriteStartArray(name);
        foreach (var entry in list) json.WriteStringValue(entry);
        json.WriteEndArray();
    }
}
