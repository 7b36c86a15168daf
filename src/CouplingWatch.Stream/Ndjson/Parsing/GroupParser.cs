using System.Text.Json;
using CouplingWatch.Records;

namespace CouplingWatch.Ndjson.Parsing;

/// <summary>The level 2 and 3 parts of an iteration: vectors, sketch, basis. Lengths are held against each other and against the shape.</summary>
internal static class GroupParser
{
    private const int SketchBlocks = 8;

    /// <summary>Reads one of the members <c>vectors</c>, <c>sketch</c>, <c>basis</c>; <paramref name="taken"/> false when the member is another one.</summary>
    public static bool Member(ref RecordCursor c, StreamShape? shape, string? group, ref GroupData data, out bool taken)
    {
        taken = true;
        if (c.Is("vectors"u8, "vectors"))
        {
            if (!Vectors(ref c, shape, group, out var vectors)) return false;
            data = data with { Vectors = vectors };
        }
        else if (c.Is("sketch"u8, "sketch"))
        {
            if (!Sketch(ref c, shape, group, out var sketch)) return false;
            data = data with { Sketch = sketch };
        }
        else if (c.Is("basis"u8, "basis"))
        {
            if (!Basis(ref c, out var basis)) return false;
            data = data with { Basis = basis };
        }
        else
        {
            taken = false;
        }
        return true;
    }

    public static bool Groups(ref RecordCursor c, StreamShape? shape, out IReadOnlyDictionary<string, GroupData>? groups)
    {
        groups = null;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject("an object of groups by name")) return false;
        var made = new Dictionary<string, GroupData>(StringComparer.Ordinal);
        while (c.NextMember())
        {
            var name = c.MemberName();
            if (!c.EnterObject()) return false;
            var data = new GroupData(null, null, null);
            while (c.NextMember())
            {
                if (!Member(ref c, shape, name, ref data, out var taken)) return false;
                if (!taken && !c.SkipMember()) return false;
            }
            if (c.Problem is not null) return false;
            made[name] = data;
        }
        groups = made;
        return c.Problem is null;
    }

    private static bool Vectors(ref RecordCursor c, StreamShape? shape, string? group, out VectorPair? pair)
    {
        pair = null;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject()) return false;
        double[]? residual = null, output = null;
        while (c.NextMember())
        {
            if (c.Is("residual"u8, "residual"))
            {
                if (!VectorValues.Vector(ref c, out residual)) return false;
                if (shape?.Mismatch(group, residual!.Length) is { } expected) return c.Fail(ProblemCodes.WrongLength, expected, $"{residual!.Length} values");
            }
            else if (c.Is("output"u8, "output"))
            {
                if (!VectorValues.Vector(ref c, out output)) return false;
                if (shape?.Mismatch(group, output!.Length) is { } expected) return c.Fail(ProblemCodes.WrongLength, expected, $"{output!.Length} values");
            }
            else if (!c.SkipMember())
            {
                return false;
            }
        }
        if (c.Problem is not null) return false;
        if (residual is null) return c.FailMissing("residual", "the residual vector");
        if (output is null) return c.FailMissing("output", "the output vector");
        if (residual.Length == 0) return c.Fail(ProblemCodes.WrongLength, "at least one value", "an empty vector");
        if (residual.Length != output.Length) return c.Fail(ProblemCodes.WrongLength, "residual and output of one length", $"{residual.Length} and {output.Length} values");
        pair = new VectorPair(residual, output);
        return true;
    }

    private static bool Sketch(ref RecordCursor c, StreamShape? shape, string? group, out SketchPair? pair)
    {
        pair = null;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject()) return false;
        double[]? residual = null, output = null;
        int? rows = null, fullRows = null;
        long? seed = null;
        while (c.NextMember())
        {
            if (c.Is("rows"u8, "rows"))
            {
                if (!c.Int(out var number, SketchBlocks)) return false;
                if (number % SketchBlocks != 0) return c.Fail(ProblemCodes.OutOfRange, $"a multiple of {SketchBlocks}");
                rows = number;
            }
            else if (c.Is("seed"u8, "seed"))
            {
                if (!c.Integer(out var number)) return false;
                seed = number;
            }
            else if (c.Is("residual"u8, "residual"))
            {
                if (!VectorValues.Vector(ref c, out residual)) return false;
            }
            else if (c.Is("output"u8, "output"))
            {
                if (!VectorValues.Vector(ref c, out output)) return false;
            }
            else if (c.Is("fullRows"u8, "fullRows"))
            {
                if (!c.MaybeInt(out fullRows, 1)) return false;
            }
            else if (!c.SkipMember())
            {
                return false;
            }
        }
        if (c.Problem is not null) return false;
        if (rows is not { } r) return c.FailMissing("rows", "the number of rows");
        if (seed is not { } s) return c.FailMissing("seed", "the seed");
        if (residual is null) return c.FailMissing("residual", "the sketch of the residual");
        if (output is null) return c.FailMissing("output", "the sketch of the output");
        if (residual.Length != r || output.Length != r)
            return c.Fail(ProblemCodes.WrongLength, $"residual and output of {r} rows", $"{residual.Length} and {output.Length} values");
        if (shape is not null && !shape.SketchFits(group, r, s, out var fixedBefore)) return c.Fail(ProblemCodes.SketchChanged, fixedBefore, $"{r} rows with seed {s}");
        pair = new SketchPair(r, s, residual, output, fullRows);
        return true;
    }

    private static bool Basis(ref RecordCursor c, out BasisReport? report)
    {
        report = null;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject()) return false;
        ColumnBirth[]? columns = null, left = null;
        double[]? factor = null, coefficients = null;
        while (c.NextMember())
        {
            var good = c.Is("columns"u8, "columns") ? Births(ref c, out columns)
                : c.Is("left"u8, "left") ? Births(ref c, out left)
                : c.Is("r"u8, "r") ? VectorValues.Numbers(ref c, out factor)
                : c.Is("coefficients"u8, "coefficients") ? VectorValues.Numbers(ref c, out coefficients)
                : c.SkipMember();
            if (!good) return false;
        }
        if (c.Problem is not null) return false;
        if (columns is null) return c.FailMissing("columns", "the columns in factor order");
        long n = columns.Length;
        if (factor is not null && factor.Length != n * (n + 1) / 2)
            return c.Fail(ProblemCodes.WrongLength, $"r of {n * (n + 1) / 2} numbers for {n} columns", $"{factor.Length} numbers");
        if (coefficients is not null && coefficients.Length != n)
            return c.Fail(ProblemCodes.WrongLength, $"{n} coefficients for {n} columns", $"{coefficients.Length} numbers");
        report = new BasisReport(columns, left ?? [], factor, coefficients);
        return true;
    }

    private static bool Births(ref RecordCursor c, out ColumnBirth[]? births)
    {
        const string expected = "a list of [step, iteration] or [step, iteration, attempt]";
        births = null;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterArray(expected)) return false;
        var list = new List<ColumnBirth>();
        Span<int> parts = stackalloc int[3];
        while (c.NextElement(list.Count))
        {
            if (c.Json.TokenType != JsonTokenType.StartArray) return c.Fail(ProblemCodes.WrongType, "[step, iteration] or [step, iteration, attempt]");
            var count = 0;
            parts.Clear();
            while (c.Json.Read() && c.Json.TokenType != JsonTokenType.EndArray)
            {
                if (count == 3) return c.Fail(ProblemCodes.WrongLength, "two or three numbers", "more");
                if (!c.Int(out parts[count++])) return false;
            }
            if (count < 2) return c.Fail(ProblemCodes.WrongLength, "two or three numbers", $"{count}");
            list.Add(new ColumnBirth(parts[0], parts[1], parts[2]));
        }
        births = [.. list];
        return c.Problem is null;
    }
}
