using System.Buffers;
using System.Text;
using System.Text.Json;

namespace CouplingWatch.Ndjson.Parsing;

/// <summary>
/// Walks one JSON object and keeps the first problem, with the path to where it arose. Every method that returns false has set
/// <see cref="Problem"/>, except <see cref="NextMember"/> and <see cref="NextElement"/>, which return false at the end too.
/// </summary>
internal ref partial struct RecordCursor(ReadOnlySpan<byte> line, long lineNumber, ParseScratch scratch)
{
    private static readonly JsonReaderOptions ReaderOptions = new() { MaxDepth = ParseScratch.DepthLimit + 8 };
    private const int FoundLength = 40;

    public Utf8JsonReader Json = new(line, ReaderOptions);
    private int depth = -1;

    public RecordProblem? Problem { get; private set; }

    public readonly ParseScratch Scratch => scratch;

    /// <summary>Takes the start of an object as the value at hand.</summary>
    public bool EnterObject(string expected = "an object")
    {
        if (Json.TokenType != JsonTokenType.StartObject) return Fail(ProblemCodes.WrongType, expected);
        depth++;
        return depth < ParseScratch.DepthLimit || Fail(ProblemCodes.TooDeep, $"at most {ParseScratch.DepthLimit} levels");
    }

    /// <summary>Moves to the next member name; false at the end of the object.</summary>
    public bool NextMember()
    {
        if (Problem is not null) return false;
        scratch.Path[depth] = null;
        scratch.Index[depth] = -1;
        Json.Read();
        if (Json.TokenType == JsonTokenType.PropertyName) return true;
        depth--;
        return false;
    }

    /// <summary>Whether the member at hand has this name; if so its value is at hand next.</summary>
    public bool Is(ReadOnlySpan<byte> utf8, string name)
    {
        if (!Json.ValueTextEquals(utf8)) return false;
        scratch.Path[depth] = name;
        Json.Read();
        return true;
    }

    /// <summary>The member name at hand, interned; its value is at hand next.</summary>
    public string MemberName()
    {
        var name = Json.ValueIsEscaped ? scratch.Names.Intern(Encoding.UTF8.GetBytes(Json.GetString()!)) : scratch.Names.Intern(Json.ValueSpan);
        scratch.Path[depth] = name;
        Json.Read();
        return name;
    }

    /// <summary>Leaves out an unknown member: its name is at hand.</summary>
    public bool SkipMember()
    {
        Json.Read();
        return SkipValue();
    }

    /// <summary>Leaves out the value at hand, however it is nested, within the depth limit.</summary>
    public bool SkipValue()
    {
        var open = 0;
        do
        {
            if (Json.TokenType is JsonTokenType.StartObject or JsonTokenType.StartArray)
            {
                open++;
                if (Json.CurrentDepth >= ParseScratch.DepthLimit) return Fail(ProblemCodes.TooDeep, $"at most {ParseScratch.DepthLimit} levels");
            }
            else if (Json.TokenType is JsonTokenType.EndObject or JsonTokenType.EndArray)
            {
                open--;
            }
        }
        while (open > 0 && Json.Read());
        return true;
    }

    /// <summary>Takes the start of an array as the value at hand.</summary>
    public bool EnterArray(string expected)
    {
        return Json.TokenType == JsonTokenType.StartArray || Fail(ProblemCodes.WrongType, expected);
    }

    /// <summary>Moves to the next element; false at the end of the array.</summary>
    public bool NextElement(int index)
    {
        if (Problem is not null) return false;
        Json.Read();
        scratch.Index[depth] = Json.TokenType == JsonTokenType.EndArray ? -1 : index;
        return scratch.Index[depth] >= 0;
    }

    public bool Fail(string code, string expected) => Fail(code, expected, Found());

    public bool Fail(string code, string expected, string? found)
    {
        Problem ??= new RecordProblem(lineNumber, MemberPath(), expected, found, code);
        return false;
    }

    /// <summary>Reports a member that is not there, under the object at hand (whose end has been read).</summary>
    public bool FailMissing(string name, string expected)
    {
        if (Problem is null)
        {
            var parent = MemberPath();
            Problem = new RecordProblem(lineNumber, parent is null ? name : $"{parent}.{name}", expected, null, ProblemCodes.MissingMember);
        }
        return false;
    }

    /// <summary>Takes over the problem of a cursor that looked ahead; always false.</summary>
    public bool Adopt(in RecordCursor ahead)
    {
        Problem ??= ahead.Problem;
        return false;
    }

    public readonly string? MemberPath()
    {
        var path = new StringBuilder();
        for (var i = 0; i <= depth && i <= ParseScratch.DepthLimit; i++)
        {
            if (scratch.Path[i] is not { } name) continue;
            if (path.Length > 0) path.Append('.');
            path.Append(name.Length <= FoundLength ? name : name[..FoundLength] + "…");
            if (scratch.Index[i] >= 0) path.Append('[').Append(scratch.Index[i]).Append(']');
        }
        return path.Length == 0 ? null : path.ToString();
    }

    /// <summary>The value at hand, shortened, for a message.</summary>
    private readonly string? Found() => Json.TokenType switch
    {
        JsonTokenType.StartObject or JsonTokenType.EndObject => "an object",
        JsonTokenType.StartArray or JsonTokenType.EndArray => "an array",
        JsonTokenType.String => $"\"{Shortened()}\"",
        JsonTokenType.None => null,
        _ => Shortened(),
    };

    private readonly string Shortened()
    {
        var bytes = Json.HasValueSequence ? Json.ValueSequence.ToArray() : Json.ValueSpan;
        return bytes.Length <= FoundLength ? Encoding.UTF8.GetString(bytes) : Encoding.UTF8.GetString(bytes[..FoundLength]) + "…";
    }
}
