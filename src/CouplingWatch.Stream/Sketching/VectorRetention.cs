using System.Text.Json;
using System.Text.Json.Nodes;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;

namespace CouplingWatch.Sketching;

/// <summary>
/// What is kept of long vectors: those of more than 16,384 values are kept as a sketch of 1,024 rows, marked with their full length. The
/// norms stay those that were sent, so they are exact. A record with short vectors, or with a sketch of its own, is kept as it is.
/// </summary>
public static class VectorRetention
{
    public const int LongestVector = 16384;
    public const int KeptRows = 1024;

    /// <summary>Seed of every kept sketch; one seed for all, so that differences of sketches stay sketches of differences.</summary>
    public const long KeptSeed = 1_414_213_562;

    private static readonly SparseSignSketch Sketch = new(KeptRows, KeptSeed);

    /// <summary>The record as it is kept and judged; the same object when nothing changes.</summary>
    public static StreamRecord Keep(StreamRecord record)
    {
        ArgumentNullException.ThrowIfNull(record);
        if (record is not IterationRecord iteration) return record;
        if (IsLong(iteration.Vectors)) iteration = iteration with { Vectors = null, Sketch = iteration.Sketch ?? Sketched(iteration.Vectors!) };
        if (iteration.Groups is { } groups && groups.Values.Any(g => IsLong(g.Vectors)))
        {
            iteration = iteration with
            {
                Groups = groups.ToDictionary(g => g.Key, g => IsLong(g.Value.Vectors) ? g.Value with { Vectors = null, Sketch = g.Value.Sketch ?? Sketched(g.Value.Vectors!) } : g.Value, StringComparer.Ordinal),
            };
        }
        return iteration;
    }

    /// <summary>The JSON of the record as it is kept: the bytes received where nothing changed, otherwise the same members with the sketch in the place of the vectors.</summary>
    /// <param name="kept">What <see cref="Keep"/> made of <paramref name="sent"/>.</param>
    public static ReadOnlyMemory<byte> KeepBody(StreamRecord sent, StreamRecord kept, ReadOnlyMemory<byte> received)
    {
        if (ReferenceEquals(sent, kept) || kept is not IterationRecord iteration) return received;
        JsonObject body;
        try
        {
            body = JsonNode.Parse(received.Span)!.AsObject();
            Replace(body, iteration.Vectors, iteration.Sketch);
            if (iteration.Groups is { } groups)
            {
                foreach (var (name, data) in groups) Replace(body["groups"]![name]!.AsObject(), data.Vectors, data.Sketch);
            }
        }
        catch (Exception thrown) when (thrown is JsonException or ArgumentException)
        {
            // Bare NaN tokens or repeated names: strict JSON cannot carry the text as it was, so the record is written anew.
            return RecordWriter.Line(kept).AsMemory()[..^1];
        }
        return JsonSerializer.SerializeToUtf8Bytes(body);
    }

    private static void Replace(JsonObject part, VectorPair? vectors, SketchPair? sketch)
    {
        if (vectors is not null || sketch is null) return;
        part.Remove("vectors");
        if (part.ContainsKey("sketch")) return;
        part["sketch"] = new JsonObject
        {
            ["rows"] = sketch.Rows,
            ["seed"] = sketch.Seed,
            ["fullRows"] = sketch.FullRows,
            ["residual"] = Base64(sketch.Residual),
            ["output"] = Base64(sketch.Output),
        };
    }

    private static bool IsLong(VectorPair? vectors) => vectors?.Residual.Length > LongestVector;

    private static SketchPair Sketched(VectorPair vectors)
    {
        var (residual, output) = Sketch.ApplyBoth(vectors.Residual, vectors.Output);
        return new SketchPair(KeptRows, KeptSeed, residual, output, vectors.Residual.Length);
    }

    private static string Base64(double[] values)
    {
        var bytes = new byte[8 * values.Length];
        for (var i = 0; i < values.Length; i++) System.Buffers.Binary.BinaryPrimitives.WriteDoubleLittleEndian(bytes.AsSpan(8 * i), values[i]);
        return Convert.ToBase64String(bytes);
    }
}
