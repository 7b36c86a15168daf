using System.Collections;
using System.Reflection;
using System.Text.Json.Nodes;
using CouplingWatch.Records;

namespace CouplingWatch.Testing.Shapes;

/// <summary>Compares two shapes member by member, in depth; numbers by their bits, except that every NaN equals every NaN.</summary>
public static class Structure
{
    /// <summary>The path of the first difference and both values; null when there is none.</summary>
    public static string? FirstDifference(object? expected, object? actual, string path = "$")
    {
        if (expected is null || actual is null) return expected is null && actual is null ? null : $"{path}: {expected ?? "null"} / {actual ?? "null"}";
        if (expected is double a && actual is double b)
            return (double.IsNaN(a) && double.IsNaN(b)) || BitConverter.DoubleToInt64Bits(a) == BitConverter.DoubleToInt64Bits(b) ? null : $"{path}: {a:R} / {b:R}";
        if (expected is double[] numbers && actual is double[] others && numbers.AsSpan().SequenceEqual(others)) return null;
        if (expected is JsonNode node) return JsonNode.DeepEquals(node, actual as JsonNode) ? null : $"{path}: {node.ToJsonString()} / {(actual as JsonNode)?.ToJsonString()}";
        if (expected is NamedValues named) return NamedDifference(named, actual as NamedValues, path);
        if (expected is IDictionary map) return MapDifference(map, actual as IDictionary, path);
        if (expected is string || expected.GetType().IsPrimitive || expected.GetType().IsEnum || expected is DateTimeOffset)
            return expected.Equals(actual) ? null : $"{path}: {expected} / {actual}";
        if (expected is IEnumerable list) return ListDifference([.. list.Cast<object?>()], actual is IEnumerable other ? [.. other.Cast<object?>()] : null, path);
        if (expected.GetType() != actual.GetType()) return $"{path}: {expected.GetType().Name} / {actual.GetType().Name}";
        foreach (var property in expected.GetType().GetProperties(BindingFlags.Public | BindingFlags.Instance))
        {
            if (property.GetIndexParameters().Length > 0) continue;
            if (FirstDifference(property.GetValue(expected), property.GetValue(actual), $"{path}.{property.Name}") is { } found) return found;
        }
        return null;
    }

    private static string? NamedDifference(NamedValues expected, NamedValues? actual, string path)
    {
        if (actual is null || expected.Count != actual.Count) return $"{path}: {expected.Count} / {actual?.Count} named values";
        for (var i = 0; i < expected.Count; i++)
        {
            if (expected.Names[i] != actual.Names[i]) return $"{path}[{i}]: {expected.Names[i]} / {actual.Names[i]}";
            if (FirstDifference(expected.Values[i], actual.Values[i], $"{path}.{expected.Names[i]}") is { } found) return found;
        }
        return null;
    }

    private static string? MapDifference(IDictionary expected, IDictionary? actual, string path)
    {
        if (actual is null || expected.Count != actual.Count) return $"{path}: {expected.Count} / {actual?.Count} entries";
        foreach (var key in expected.Keys)
        {
            if (!actual.Contains(key)) return $"{path}: {key} / missing";
            if (FirstDifference(expected[key], actual[key], $"{path}.{key}") is { } found) return found;
        }
        return null;
    }

    private static string? ListDifference(List<object?> expected, List<object?>? actual, string path)
    {
        if (actual is null || expected.Count != actual.Count) return $"{path}: {expected.Count} / {actual?.Count} entries";
        for (var i = 0; i < expected.Count; i++)
        {
            if (FirstDifference(expected[i], actual[i], $"{path}[{i}]") is { } found) return found;
        }
        return null;
    }
}
