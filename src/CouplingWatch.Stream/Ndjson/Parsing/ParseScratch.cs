namespace CouplingWatch.Ndjson.Parsing;

/// <summary>What a reader keeps between lines: the names of the stream, the path to the member being read, buffers.</summary>
internal sealed class ParseScratch(NameTable names)
{
    /// <summary>Deepest nesting a record may have.</summary>
    public const int DepthLimit = 32;

    /// <summary>Most entries of one object of named numbers.</summary>
    public const int NamedLimit = 1024;

    public NameTable Names { get; } = names;

    /// <summary>Member name at each depth of the object being read.</summary>
    public string?[] Path { get; } = new string?[DepthLimit + 1];

    /// <summary>Element of the array being read at each depth; −1 outside one.</summary>
    public int[] Index { get; } = new int[DepthLimit + 1];

    public string[] NameBuffer { get; set; } = new string[8];

    public double[] ValueBuffer { get; set; } = new double[8];

    public List<double> Numbers { get; } = [];
}
