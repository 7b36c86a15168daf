using CouplingWatch.Records;

namespace CouplingWatch.Ndjson;

/// <summary>
/// How long the vectors of a stream are, as far as its <c>open</c>, its latest <c>resize</c> and its first vectors say. Immutable.
/// A field without a group belongs to the group "".
/// </summary>
public sealed class StreamShape
{
    private readonly IReadOnlyDictionary<string, GroupShape> groups;

    private StreamShape(IReadOnlyDictionary<string, GroupShape> groups) => this.groups = groups;

    public static StreamShape Of(IReadOnlyList<FieldDeclaration> fields)
    {
        ArgumentNullException.ThrowIfNull(fields);
        var unknowns = fields.Where(f => f.Role == FieldRole.Unknown).ToList();
        var groups = unknowns.GroupBy(f => f.Group ?? "", StringComparer.Ordinal).ToDictionary(g => g.Key, g => Sized(g), StringComparer.Ordinal);
        groups[Whole] = Sized(unknowns);
        return new StreamShape(groups);
    }

    /// <summary>The whole interface vector, where the groups are not told apart.</summary>
    internal const string Whole = "\0whole";

    /// <summary>Length of the vectors of a group, of the whole interface vector when null; null while not known.</summary>
    public int? VectorLength(string? group = null) => Find(group) is { Known: true } shape ? shape.Length : null;

    /// <summary>What a vector of this length gets wrong, as the end of "expected …"; null when it fits.</summary>
    internal string? Mismatch(string? group, int length)
    {
        if (Find(group) is not { } shape) return null;
        if (shape.Known) return length == shape.Length ? null : $"{shape.Length} values (the {(group is null ? "declared sizes" : $"sizes of group {group}")} together)";
        return length >= shape.Length + shape.Undeclared ? null : $"at least {shape.Length + shape.Undeclared} values (the declared sizes, and one a field without)";
    }

    internal bool SketchFits(string? group, int rows, long seed, out string expected)
    {
        expected = "";
        if (Find(group) is not { Rows: > 0 } shape || (shape.Rows == rows && shape.Seed == seed)) return true;
        expected = $"{shape.Rows} rows with seed {shape.Seed} until the next resize";
        return false;
    }

    /// <summary>This shape with what the record fixes: a new one after <c>open</c> and <c>resize</c>, lengths by first vectors and sketches.</summary>
    public StreamShape After(StreamRecord record) => record switch
    {
        OpenRecord open => Of(open.Fields),
        ResizeRecord resize => Of(resize.Fields),
        IterationRecord iteration => After(iteration),
        _ => this,
    };

    private StreamShape After(IterationRecord iteration)
    {
        if (iteration.Groups is not { } groupData) return After(Whole, iteration.Vectors, iteration.Sketch);
        var shape = this;
        foreach (var (name, data) in groupData) shape = shape.After(name, data.Vectors, data.Sketch);
        return shape;
    }

    private StreamShape After(string group, VectorPair? vectors, SketchPair? sketch)
    {
        if (!groups.TryGetValue(group, out var known)) return this;
        var learned = known;
        // A sketch kept in the place of vectors stands for vectors of its full length.
        if ((vectors?.Residual.Length ?? sketch?.FullRows) is { } length && !known.Known) learned = learned with { Length = length, Undeclared = 0 };
        if (sketch is { FullRows: null } && known.Rows == 0) learned = learned with { Rows = sketch.Rows, Seed = sketch.Seed };
        if (learned == known) return this;
        return new StreamShape(new Dictionary<string, GroupShape>(groups, StringComparer.Ordinal) { [group] = learned });
    }

    private GroupShape? Find(string? group) => groups.TryGetValue(group ?? Whole, out var shape) ? shape : null;

    private static GroupShape Sized(IEnumerable<FieldDeclaration> fields)
    {
        var shape = new GroupShape(0, 0, 0, 0);
        foreach (var field in fields)
            shape = field.Size is { } size ? shape with { Length = shape.Length + size } : shape with { Undeclared = shape.Undeclared + 1 };
        return shape;
    }

    private sealed record GroupShape(int Length, int Undeclared, int Rows, long Seed)
    {
        public bool Known => Undeclared == 0;
    }
}
